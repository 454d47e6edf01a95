import { describe, expect, it } from "vitest";
import {
  decibels,
  figure,
  formatFixed,
  formatSi,
  frequency,
  prefixOf,
  readNumber,
  sizeMm,
  withUnit,
} from "./figures";

describe("figure", () => {
  it.each([
    [0, "0"],
    [0.05, "0.05"],
    [-7.91, "−7.91"],
    [12480, "12\u2009500"],
    [1234.4, "1230"],
    [3.5e7, "3.5\u2009×\u200910⁷"],
    [1e-9, "10⁻⁹"],
    [-2.5e-5, "−2.5\u2009×\u200910⁻⁵"],
    [999_999, "10⁶"],
    [Number.POSITIVE_INFINITY, "∞"],
    [Number.NEGATIVE_INFINITY, "−∞"],
    [Number.NaN, "–"],
  ])("writes %s as %s", (value, text) => {
    expect(figure(value)).toBe(text);
  });
  it("keeps as many digits as asked", () => {
    expect(figure(12480, 5)).toBe("12\u2009480");
  });
});

describe("formatSi", () => {
  it.each([
    [2840, "Ω/m", "2.84\u2009kΩ/m"],
    [6.6e-7, "m", "660\u2009nm"],
    [0.05, "S/m", "50\u2009mS/m"],
    [999.9, "Hz", "1\u2009kHz"],
    [-1.5e-3, "V", "−1.5\u2009mV"],
    [0, "S/m", "0\u2009S/m"],
    [5.8e7, "S/m", "58\u2009MS/m"],
    [3e-14, "J", "0.03\u2009pJ"],
    [Number.POSITIVE_INFINITY, "m", "∞\u2009m"],
  ])("writes %s %s as %s", (value, unit, text) => {
    expect(formatSi(value, unit)).toBe(text);
  });
});

describe("other figures", () => {
  it("gives the prefix of a whole scale", () => {
    expect(prefixOf(-8200)).toEqual({ prefix: "k", factor: 1e3 });
    expect(prefixOf(0)).toEqual({ prefix: "", factor: 1 });
  });
  it("keeps decimals fixed", () => {
    expect(formatFixed(-7.9, 2)).toBe("−7.90");
    expect(formatFixed(Number.NaN, 2)).toBe("–");
  });
  it("writes levels with fixed decimals and no negative zero", () => {
    expect(decibels(-20)).toBe("−20.0\u2009dB");
    expect(decibels(-0.01)).toBe("0.0\u2009dB");
    expect(decibels(Number.NEGATIVE_INFINITY)).toBe("−∞\u2009dB");
  });
  it("writes frequencies and sizes", () => {
    expect(frequency(0.912)).toBe("912\u2009MHz");
    expect(frequency(10)).toBe("10\u2009GHz");
    expect(sizeMm(300, 200.5)).toBe("300\u2009×\u2009200.5\u2009mm");
    expect(withUnit(3, "")).toBe("3");
  });
});

describe("readNumber", () => {
  it.each([
    ["0,05", 0.05],
    [" 12 480 ", 12480],
    ["−3", -3],
    ["2e-3", 0.002],
    [".5", 0.5],
  ])("reads %j", (text, value) => {
    expect(readNumber(text)).toBe(value);
  });
  it.each(["", "a", "1.2.3", "1,2,3", "--1", "1e999", "0x10", "Infinity"])("refuses %j", (text) => {
    expect(readNumber(text)).toBeNull();
  });
});
