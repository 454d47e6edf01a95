/**
 * Frame codec, version 1: a field sample as 8-bit levels with the scale that turns them back into SI units.
 * PROTOCOL.md gives the layout byte by byte. All header fields are little-endian.
 */
import type { FieldSample, Frame } from "./types.js";
import { FIELD_QUANTITIES, isSigned } from "./types.js";

export const FRAME_VERSION = 1;
/** Bytes before the levels. */
export const FRAME_HEADER_BYTES = 48;
/** "HFR": bytes that are not a frame at all are told apart from a frame of another version. */
const MAGIC = [0x48, 0x46, 0x52] as const;
const LARGEST_SIDE = 0xffff;
/** (2 − 2⁻²³)·2¹²⁷: what is beyond is not finite. */
const LARGEST_FLOAT32 = (2 - 2 ** -23) * 2 ** 127;

const AT = {
  version: 3,
  quantity: 4,
  reserved5: 5,
  width: 6,
  height: 8,
  reserved10: 10,
  sequence: 12,
  step: 16,
  reserved20: 20,
  timeNs: 24,
  range: 32,
  peak: 40,
} as const;

export type FrameErrorCode = "not-a-frame" | "version" | "truncated" | "size" | "quantity" | "header";

/** Bytes that are no frame this codec reads; the message is a sentence. */
export class FrameError extends Error {
  override name = "FrameError";
  constructor(
    readonly code: FrameErrorCode,
    message: string,
  ) {
    super(message);
  }
}

/** Bytes of a message with `width` × `height` levels. */
export const frameByteLength = (width: number, height: number): number => FRAME_HEADER_BYTES + width * height;

export interface EncodeOptions {
  /** Rises with every frame of a run; wraps at 2³². */
  sequence: number;
  /** Value of level 255 in the quantity's SI unit; null: the frame's own peak. */
  range: number | null;
  /** Memory to write into; at least `frameByteLength` bytes. Left out: a new array. */
  target?: Uint8Array;
}

/** By index and a constant bound: the iterator of a typed array took thirty times as long here. */
const peakOf = (values: Float32Array): number => {
  let peak = 0;
  for (let index = 0; index < values.length; index++) {
    const magnitude = Math.abs(values[index] ?? 0);
    if (magnitude > peak && magnitude <= LARGEST_FLOAT32) peak = magnitude;
  }
  return peak;
};

/** Levels 1…255 about 128, clamped; NaN becomes 0. `scale` is 127/range. */
const writeSigned = (values: Float32Array, scale: number, levels: Uint8Array, offset: number): void => {
  for (let index = 0; index < values.length; index++) {
    const level = 128.5 + (values[index] ?? 0) * scale;
    // The comparisons are false for NaN, which then falls through to 0.
    levels[offset + index] = level >= 255 ? 255 : level >= 1 ? level : level < 1 ? 1 : 0;
  }
};

/** Levels 0…255, clamped; NaN becomes 0. `scale` is 255/range. */
const writeUnsigned = (values: Float32Array, scale: number, levels: Uint8Array, offset: number): void => {
  for (let index = 0; index < values.length; index++) {
    const level = 0.5 + (values[index] ?? 0) * scale;
    levels[offset + index] = level >= 255 ? 255 : level >= 0 ? level : 0;
  }
};

/**
 * One message for a sample. A level is off by at most half a step: range/254 for signed quantities, range/510 for
 * others; values beyond `range` are cut to it. Throws a RangeError where size, range or target do not fit.
 */
export const encodeFrame = (sample: FieldSample, options: EncodeOptions): Uint8Array => {
  const { width, height, values } = sample;
  if (!Number.isInteger(width) || !Number.isInteger(height) || width < 1 || height < 1)
    throw new RangeError(`A frame of ${String(width)} × ${String(height)} samples cannot be sent.`);
  if (width > LARGEST_SIDE || height > LARGEST_SIDE)
    throw new RangeError(`A frame has at most ${String(LARGEST_SIDE)} samples along a side.`);
  if (values.length !== width * height)
    throw new RangeError(`${String(values.length)} values are not ${String(width)} × ${String(height)}.`);
  if (options.range !== null && !(options.range > 0 && Number.isFinite(options.range)))
    throw new RangeError(`A range of ${String(options.range)} is no scale; it must be finite and above 0.`);
  const bytes = frameByteLength(width, height);
  const target = options.target ?? new Uint8Array(bytes);
  if (target.length < bytes)
    throw new RangeError(
      `The target holds ${String(target.length)} bytes; the frame needs ${String(bytes)}.`,
    );
  const peak = peakOf(values);
  const range = options.range ?? peak;
  const view = new DataView(target.buffer, target.byteOffset, bytes);
  MAGIC.forEach((byte, index) => {
    view.setUint8(index, byte);
  });
  view.setUint8(AT.version, FRAME_VERSION);
  view.setUint8(AT.quantity, FIELD_QUANTITIES.indexOf(sample.quantity));
  view.setUint8(AT.reserved5, 0);
  view.setUint16(AT.width, width, true);
  view.setUint16(AT.height, height, true);
  view.setUint16(AT.reserved10, 0, true);
  view.setUint32(AT.sequence, options.sequence >>> 0, true);
  view.setUint32(AT.step, sample.step, true);
  view.setUint32(AT.reserved20, 0, true);
  view.setFloat64(AT.timeNs, sample.timeNs, true);
  view.setFloat64(AT.range, range, true);
  view.setFloat64(AT.peak, peak, true);
  // A field of zeros has range 0: every level is then the zero level, whatever the scale.
  const scale = range > 0 ? 1 / range : 0;
  if (isSigned(sample.quantity)) writeSigned(values, 127 * scale, target, FRAME_HEADER_BYTES);
  else writeUnsigned(values, 255 * scale, target, FRAME_HEADER_BYTES);
  return target.length === bytes ? target : target.subarray(0, bytes);
};

const checkStart = (bytes: Uint8Array): void => {
  const known = Math.min(bytes.length, MAGIC.length);
  for (let index = 0; index < known; index++)
    if (bytes[index] !== MAGIC[index])
      throw new FrameError("not-a-frame", "These bytes are no field frame: they do not begin with HFR.");
  const version = bytes.at(AT.version);
  if (version !== undefined && version !== FRAME_VERSION)
    throw new FrameError(
      "version",
      `The frame has version ${String(version)}, but this viewer reads version ${String(FRAME_VERSION)}; reload the page.`,
    );
  if (bytes.length < FRAME_HEADER_BYTES)
    throw new FrameError(
      "truncated",
      `The frame is cut off after ${String(bytes.length)} bytes, within its header of ${String(FRAME_HEADER_BYTES)}.`,
    );
};

/** The frame in a message. Its levels are a view of `bytes`, not a copy. Throws a FrameError. */
export const decodeFrame = (bytes: Uint8Array): Frame => {
  checkStart(bytes);
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const quantity = FIELD_QUANTITIES.at(view.getUint8(AT.quantity));
  if (quantity === undefined)
    throw new FrameError(
      "quantity",
      `The frame shows an unknown quantity (number ${String(bytes[AT.quantity])}).`,
    );
  const width = view.getUint16(AT.width, true);
  const height = view.getUint16(AT.height, true);
  const expected = frameByteLength(width, height);
  if (width === 0 || height === 0)
    throw new FrameError(
      "size",
      `The frame has no samples: its size is ${String(width)} × ${String(height)}.`,
    );
  if (bytes.length < expected)
    throw new FrameError(
      "truncated",
      `The frame is cut off: ${String(width)} × ${String(height)} levels need ${String(expected)} bytes, ${String(bytes.length)} came.`,
    );
  if (bytes.length > expected)
    throw new FrameError(
      "size",
      `The frame is too long: ${String(width)} × ${String(height)} levels need ${String(expected)} bytes, ${String(bytes.length)} came.`,
    );
  const timeNs = view.getFloat64(AT.timeNs, true);
  const range = view.getFloat64(AT.range, true);
  const peak = view.getFloat64(AT.peak, true);
  if (!(Number.isFinite(timeNs) && range >= 0 && range < Infinity && peak >= 0 && peak < Infinity))
    throw new FrameError("header", "The frame's time, range or peak is not a finite number.");
  return {
    quantity,
    width,
    height,
    step: view.getUint32(AT.step, true),
    timeNs,
    sequence: view.getUint32(AT.sequence, true),
    range,
    peak,
    levels: bytes.subarray(FRAME_HEADER_BYTES, expected),
  };
};

/** The value of a level in the quantity's SI unit; NaN for level 0 of a signed quantity. */
export const levelValue = (frame: Pick<Frame, "quantity" | "range">, level: number): number => {
  if (!isSigned(frame.quantity)) return (level / 255) * frame.range;
  return level === 0 ? Number.NaN : ((level - 128) / 127) * frame.range;
};
