/** What drives a scene and what is read from it: sources, ports, probes, limits. */
import { z } from "zod";
import { MAXIMA } from "./limits.js";
import {
  angleSchema,
  frequencyGHzSchema,
  idSchema,
  lengthSchema,
  nameSchema,
  pointSchema,
} from "./schema-values.js";

/** A Gaussian-modulated carrier; `widthGHz` lies between its −20 dB points. */
const pulseSchema = z.strictObject({
  kind: z.literal("pulse"),
  centerGHz: frequencyGHzSchema,
  widthGHz: frequencyGHzSchema,
});
const toneSchema = z.strictObject({
  kind: z.literal("tone"),
  GHz: frequencyGHzSchema,
  rampCycles: z.number().min(0).max(1e6).default(5),
});
/** Linear between samples, the first at t = 0, zero after the last. */
const samplesSchema = z.strictObject({
  kind: z.literal("samples"),
  stepNs: z.number().positive().max(1e9),
  values: z.array(z.number()).min(1).max(MAXIMA.waveformSamples),
});
export const waveformSchema = z.discriminatedUnion("kind", [pulseSchema, toneSchema, samplesSchema]);

const amplitude = z.number().min(-1e12).max(1e12).default(1);
/** A z-directed line current at a point: electric in A for TMz, magnetic in V for TEz. */
export const lineSourceSchema = z.strictObject({
  kind: z.literal("line"),
  id: idSchema,
  waveform: waveformSchema.optional(),
  amplitude,
  x: lengthSchema,
  y: lengthSchema,
});
/** Amplitude is |E| in V/m; `angle` is the direction of travel; `insetMm` left out is 4 cells. */
export const planeWaveSchema = z.strictObject({
  kind: z.literal("plane-wave"),
  id: idSchema,
  waveform: waveformSchema.optional(),
  amplitude,
  angle: angleSchema,
  insetMm: lengthSchema.optional(),
});
export const sourceSchema = z.discriminatedUnion("kind", [lineSourceSchema, planeWaveSchema]);

export const portSchema = z.strictObject({
  id: idSchema,
  from: pointSchema,
  to: pointSchema,
  inward: z.enum(["+x", "-x", "+y", "-y"]),
  mode: z.number().int().min(0).max(1000),
  shiftMm: lengthSchema.default(0),
  drive: z.boolean().default(false),
});

export const FIELD_COMPONENTS = ["Ez", "Hx", "Hy", "Hz", "Ex", "Ey"] as const;
const probeBase = { id: idSchema, name: nameSchema.optional() };
export const pointProbeSchema = z.strictObject({
  kind: z.literal("point"),
  ...probeBase,
  x: lengthSchema,
  y: lengthSchema,
  field: z.enum(FIELD_COMPONENTS),
});
export const lineProbeSchema = z.strictObject({
  kind: z.literal("line"),
  ...probeBase,
  from: pointSchema,
  to: pointSchema,
  quantity: z.enum(["power", "voltage"]),
});
export const areaProbeSchema = z.strictObject({
  kind: z.literal("area"),
  ...probeBase,
  x: lengthSchema,
  y: lengthSchema,
  width: lengthSchema,
  height: lengthSchema,
  quantity: z.enum(["absorbed", "energy"]),
});
export const probeSchema = z.discriminatedUnion("kind", [pointProbeSchema, lineProbeSchema, areaProbeSchema]);

const limitBase = { id: idSchema, name: nameSchema, sense: z.enum(["below", "above"]) };
/** A line over frequency: straight in value against log frequency between points. */
export const lineLimitSchema = z.strictObject({
  ...limitBase,
  points: z
    .array(z.tuple([frequencyGHzSchema, z.number()]))
    .min(1)
    .max(10_000),
  of: z.union([
    z.strictObject({ probe: idSchema }),
    z.strictObject({ s: z.tuple([idSchema, idSchema]) }),
    z.strictObject({ shielding: idSchema }),
  ]),
});
/** One number. */
export const valueLimitSchema = z.strictObject({
  ...limitBase,
  value: z.number(),
  of: z.union([
    z.strictObject({ q: z.literal("highest") }),
    z.strictObject({ cutoff: z.number().int().min(1).max(1000) }),
    z.strictObject({ absorbedShare: idSchema }),
  ]),
});
export const limitSchema = z.union([lineLimitSchema, valueLimitSchema]);

export type FieldComponent = (typeof FIELD_COMPONENTS)[number];
export type Waveform = z.output<typeof waveformSchema>;
export type Source = z.output<typeof sourceSchema>;
export type Port = z.output<typeof portSchema>;
export type Probe = z.output<typeof probeSchema>;
export type Limit = z.output<typeof limitSchema>;
