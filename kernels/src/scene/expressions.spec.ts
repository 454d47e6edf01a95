import { describe, expect, it } from "vitest";
import { evaluateExpression } from "./expressions.js";
import { MAXIMA } from "./limits.js";

const values = new Map([
  ["a", 22.86],
  ["gap", 0.2],
  ["zero", 0],
]);
const valueOf = (text: string): number => {
  const result = evaluateExpression(text, values);
  if (!result.ok) throw new Error(`${text}: ${result.sentence}`);
  return result.value;
};
const sentenceOf = (text: string): string => {
  const result = evaluateExpression(text, values);
  if (result.ok) throw new Error(`${text} was accepted and gave ${String(result.value)}`);
  return result.sentence;
};

describe("an expression's value", () => {
  it.each([
    ["3", 3],
    ["1.5e-2", 0.015],
    ["a/2 - gap", 11.23],
    ["2 + 3 * 4", 14],
    ["(2 + 3) * 4", 20],
    ["10 - 4 - 3", 3],
    ["24 / 4 / 2", 3],
    ["-a", -22.86],
    ["+gap", 0.2],
    ["2*-3", -6],
    ["sqrt(16)", 4],
    ["sin(30)", 0.5],
    ["cos(60)", 0.5],
    ["tan(45)", 1],
    ["min(3, a, gap)", 0.2],
    ["max(3, a, gap)", 22.86],
    ["sqrt(3*3 + 4*4)", 5],
  ])("%s = %d", (text, expected) => {
    expect(valueOf(text)).toBeCloseTo(expected, 12);
  });

  it("is exact at the multiples of 90 degrees", () => {
    expect([valueOf("sin(180)"), valueOf("cos(90)"), valueOf("sin(-90)"), valueOf("tan(360)")]).toEqual([
      0, 0, -1, 0,
    ]);
  });

  it("never is minus zero", () => {
    expect(Object.is(valueOf("-zero"), 0)).toBe(true);
  });
});

describe("an expression that is refused", () => {
  it.each([
    ["an unknown name", "a + b", '"b" is no parameter'],
    ["a division by zero", "a/zero", "finite"],
    ["a root of a negative number", "sqrt(-1)", "finite"],
    ["a tangent at its pole", "tan(90)", "finite"],
    ["an overflow", "1e308*10", "finite"],
    ["an infinite literal", "1e999", "finite"],
    ["a power", "a**2", '"**" is not allowed'],
    ["a remainder", "a % 2", '"%" is not allowed'],
    ["a comparison", "a > 2", '">" is not allowed'],
    ["a negation of logic", "!a", '"!" is not allowed'],
    ["a choice", "a ? 1 : 2", "not one arithmetic expression"],
    ["a member", "a.constructor", "not one arithmetic expression"],
    ["an index", "a[0]", "not one arithmetic expression"],
    ["a list", "[1]", "not one arithmetic expression"],
    ["two expressions", "a gap", "not one arithmetic expression"],
    ["nothing", " ", "not one arithmetic expression"],
    ["this", "this", "not one arithmetic expression"],
    ["a text", "'a'", "is not a number"],
    ["a truth value", "true", "is not a number"],
    ["an unknown function", "exp(1)", 'calls "exp"'],
    ["a function of the prototype", "toString()", 'calls "toString"'],
    ["a called member", "a.constructor('return 1')", "no function here"],
    ["a name of the prototype", "constructor", "no parameter"],
    ["a hidden name of the prototype", "__proto__", "no parameter"],
    ["a function without its values", "sqrt + 1", "needs its values"],
    ["too few values", "min()", "takes 1 to 20 values"],
    ["too many values", "sqrt(1, 2)", "takes one value"],
    ["an open parenthesis", "(a", "cannot be read"],
    ["a missing operand", "a +", "cannot be read"],
  ])("for %s", (_what, text, part) => {
    expect(sentenceOf(text)).toContain(part);
  });

  it("for its length and its depth", () => {
    expect(sentenceOf("1+".repeat(MAXIMA.expressionLength / 2) + "1")).toContain("more than 200 characters");
    const deep = MAXIMA.expressionDepth + 1;
    expect(sentenceOf(`${"(".repeat(deep)}1${")".repeat(deep)}`)).toContain("nest deeper");
    const allowed = MAXIMA.expressionDepth;
    expect(valueOf(`${"(".repeat(allowed)}1${")".repeat(allowed)}`)).toBe(1);
  });
});
