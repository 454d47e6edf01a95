import { describe, expect, it } from "vitest";
import {
  decodeFrame,
  encodeFrame,
  FRAME_HEADER_BYTES,
  FrameError,
  frameByteLength,
  levelValue,
} from "./codec.js";
import type { FieldQuantity, FieldSample } from "./types.js";
import { FIELD_QUANTITIES, isSigned } from "./types.js";

const sample = (quantity: FieldQuantity, values: readonly number[], width = values.length): FieldSample => ({
  quantity,
  width,
  height: values.length / width,
  values: Float32Array.from(values),
  step: 123_456,
  timeNs: 17.25,
});

/** Values over three decades on both sides of zero, from a fixed linear congruential sequence. */
const spread = (count: number, signed: boolean): number[] => {
  let state = 1;
  return Array.from({ length: count }, () => {
    state = (state * 1_103_515_245 + 12_345) % 2 ** 31;
    const unit = state / 2 ** 31;
    return (signed ? 2 * unit - 1 : unit) * 10 ** (3 * unit - 1);
  });
};

const codeOf = (bytes: Uint8Array): string => {
  try {
    decodeFrame(bytes);
  } catch (error) {
    if (error instanceof FrameError) return error.code;
    throw error;
  }
  return "decoded";
};

describe("a frame's round trip", () => {
  it.each(FIELD_QUANTITIES)(
    "keeps every header field and is off by at most half a level for %s",
    (quantity) => {
      const values = spread(35, isSigned(quantity));
      const given = sample(quantity, values, 7);
      const frame = decodeFrame(encodeFrame(given, { sequence: 4_000_000_000, range: null }));
      const peak = Math.max(...given.values.map(Math.abs));
      expect(frame).toMatchObject({ quantity, width: 7, height: 5, step: 123_456, timeNs: 17.25 });
      expect(frame.sequence).toBe(4_000_000_000);
      expect(frame.peak).toBe(peak);
      expect(frame.range).toBe(peak);
      // Half a level; the last term is the rounding of the scaled float32.
      const half = (isSigned(quantity) ? peak / 254 : peak / 510) * (1 + 1e-9);
      frame.levels.forEach((level, index) => {
        expect(Math.abs(levelValue(frame, level) - (given.values[index] ?? Number.NaN))).toBeLessThanOrEqual(
          half,
        );
      });
    },
  );

  it("maps the ends and zero exactly", () => {
    const signed = decodeFrame(encodeFrame(sample("Ez", [-2, 0, 2]), { sequence: 0, range: 2 }));
    expect([...signed.levels]).toEqual([1, 128, 255]);
    expect([...signed.levels].map((level) => levelValue(signed, level))).toEqual([-2, 0, 2]);
    const unsigned = decodeFrame(encodeFrame(sample("absE", [0, 1, 2]), { sequence: 0, range: 2 }));
    expect([...unsigned.levels]).toEqual([0, 128, 255]);
  });

  it("cuts values to a locked range and still reports the true peak", () => {
    const frame = decodeFrame(encodeFrame(sample("Hz", [-9, 0.5, 9]), { sequence: 1, range: 1 }));
    expect([...frame.levels]).toEqual([1, 192, 255]);
    expect(frame).toMatchObject({ range: 1, peak: 9 });
  });

  it("shows NaN as level 0, infinities at the ends, and leaves both out of the peak", () => {
    const values = [Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY, 3];
    const signed = decodeFrame(encodeFrame(sample("Ez", values), { sequence: 0, range: null }));
    expect([...signed.levels]).toEqual([0, 255, 1, 255]);
    expect(signed.peak).toBe(3);
    expect(levelValue(signed, 0)).toBeNaN();
    const unsigned = decodeFrame(encodeFrame(sample("absE", values), { sequence: 0, range: null }));
    expect([...unsigned.levels]).toEqual([0, 255, 0, 255]);
  });

  it("gives a field of zeros the zero level everywhere", () => {
    const frame = decodeFrame(encodeFrame(sample("Ez", [0, 0, 0]), { sequence: 0, range: null }));
    expect([...frame.levels]).toEqual([128, 128, 128]);
    expect(frame.range).toBe(0);
    expect(levelValue(frame, 128)).toBe(0);
  });

  it("writes into the target it is given, at any offset, and reads from there", () => {
    const memory = new Uint8Array(200);
    const target = memory.subarray(3);
    const message = encodeFrame(sample("Ez", [1, -1]), { sequence: 0, range: null, target });
    expect(message.buffer).toBe(memory.buffer);
    expect(message).toHaveLength(frameByteLength(2, 1));
    expect([...decodeFrame(message).levels]).toEqual([255, 1]);
    expect([...memory.subarray(3 + message.length)].every((byte) => byte === 0)).toBe(true);
  });

  it("lays out the documented bytes", () => {
    const message = encodeFrame(sample("Ez", [1, -1]), { sequence: 258, range: 1 });
    expect([...message.subarray(0, 24)]).toEqual([
      0x48, 0x46, 0x52, 1, 0, 0, 2, 0, 1, 0, 0, 0, 2, 1, 0, 0, 0x40, 0xe2, 0x01, 0, 0, 0, 0, 0,
    ]);
    expect([...message.subarray(FRAME_HEADER_BYTES)]).toEqual([255, 1]);
  });
});

describe("a frame that cannot be read", () => {
  const message = encodeFrame(sample("Ez", [1, 2, 3, 4, 5, 6], 3), { sequence: 0, range: null });

  it("is called truncated at every length short of its own", () => {
    for (let length = 0; length < message.length; length++)
      expect(codeOf(message.subarray(0, length)), `${String(length)} bytes`).toBe("truncated");
    expect(codeOf(message)).toBe("decoded");
  });

  const changed = (at: number, byte: number): Uint8Array => {
    const copy = message.slice();
    copy[at] = byte;
    return copy;
  };

  it("names another version in a sentence", () => {
    expect(codeOf(changed(3, 2))).toBe("version");
    expect(() => decodeFrame(changed(3, 2))).toThrow("version 2");
  });

  it("tells foreign bytes, an unknown quantity, a wrong size and a broken header apart", () => {
    expect(codeOf(changed(0, 0))).toBe("not-a-frame");
    expect(codeOf(changed(4, 200))).toBe("quantity");
    expect(codeOf(changed(6, 2))).toBe("size");
    expect(codeOf(changed(6, 0))).toBe("size");
    expect(codeOf(Uint8Array.of(...message, 0))).toBe("size");
    // 0x7ff0… is infinity: the exponent bits of the range.
    const broken = changed(39, 0x7f);
    broken[38] = 0xf0;
    expect(codeOf(broken)).toBe("header");
  });
});

describe("a frame that cannot be sent", () => {
  it.each([
    ["no size", { ...sample("Ez", [1]), width: 0 }, { sequence: 0, range: null }],
    ["a size that is not its values'", { ...sample("Ez", [1]), width: 2 }, { sequence: 0, range: null }],
    ["too long a side", { ...sample("Ez", [1]), width: 70_000 }, { sequence: 0, range: null }],
    ["a range of zero", sample("Ez", [1]), { sequence: 0, range: 0 }],
    ["an infinite range", sample("Ez", [1]), { sequence: 0, range: Number.POSITIVE_INFINITY }],
    ["too small a target", sample("Ez", [1]), { sequence: 0, range: null, target: new Uint8Array(48) }],
  ])("is refused for %s", (_reason, given, options) => {
    expect(() => encodeFrame(given, options)).toThrow(RangeError);
  });
});
