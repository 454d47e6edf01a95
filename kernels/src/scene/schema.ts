/**
 * The scene document: one cross-section of a guide or an enclosure with everything a run needs. This schema is
 * its only definition; the JSON Schema, the API types and the form types derive from it.
 *
 * Units stand in the keys (mm, GHz, ns, S/m, Ω/m). The origin is the lower-left corner of the section; x runs
 * right, y up, z out of the page; angles are degrees counter-clockwise from +x. Unknown keys are refused.
 */
import { z } from "zod";
import { MAXIMA } from "./limits.js";
import { limitSchema, portSchema, probeSchema, sourceSchema } from "./schema-drives.js";
import type { Medium } from "./schema-media.js";
import { mediumSchema } from "./schema-media.js";
import { patchSchema } from "./schema-paint.js";
import {
  CURRENT_VERSION,
  FORMAT,
  frequencyGHzSchema,
  idSchema,
  lengthSchema,
  nameSchema,
} from "./schema-values.js";

export const metalSchema = z.enum(["conformal", "staircase"]);
const metal = metalSchema.default("conformal");
/** Either a cell size or a number of cells per shortest wavelength of the band. */
export const meshSchema = z.union([
  z.strictObject({ cellMm: z.number().positive().max(MAXIMA.lengthMm), metal }),
  z.strictObject({ cellsPerWavelength: z.number().positive().max(10_000), metal }),
]);

const plateMm = z.number().positive().max(MAXIMA.lengthMm);
/** What z is in the real object. */
export const outOfPlaneSchema = z.discriminatedUnion("kind", [
  z.strictObject({ kind: z.literal("unbounded") }),
  z.strictObject({ kind: z.literal("height"), mm: plateMm }),
  z.strictObject({ kind: z.literal("guide-width"), mm: plateMm }),
  z.strictObject({ kind: z.literal("along-guide"), mm: plateMm.optional() }),
]);

export const PARAMETER_NAME = /^[a-z][a-zA-Z0-9]{0,30}$/;
/** A named length in mm; `value` may use earlier parameters; `plus` and `minus` are tolerances. */
export const parameterSchema = z.strictObject({
  name: z
    .string()
    .regex(PARAMETER_NAME, "A parameter's name starts with a–z and has at most 31 letters and digits."),
  value: lengthSchema,
  plus: z.number().min(0).max(MAXIMA.lengthMm).default(0),
  minus: z.number().min(0).max(MAXIMA.lengthMm).default(0),
});

export const edgeSchema = z.enum(["absorbing", "electric", "magnetic"]);
export const polarizationSchema = z.enum(["TMz", "TEz"]);

const maxTimeNs = z.number().positive().max(1e9);
const decayDb = z.number().positive().max(300).default(60);

/** What may be written and uploaded; `sceneSchema` is the same with the stop time filled in. */
export const sceneDocumentSchema = z.strictObject({
  format: z.literal(FORMAT),
  version: z.literal(CURRENT_VERSION),
  name: nameSchema,
  notes: z.string().max(MAXIMA.notesLength).default(""),
  polarization: polarizationSchema,
  section: z.strictObject({ widthMm: lengthSchema, heightMm: lengthSchema }),
  band: z.strictObject({ fromGHz: frequencyGHzSchema, toGHz: frequencyGHzSchema }),
  mesh: meshSchema.default({ cellsPerWavelength: 20, metal: "conformal" }),
  background: idSchema.default("air"),
  outOfPlane: outOfPlaneSchema.default({ kind: "unbounded" }),
  parameters: z.array(parameterSchema).max(MAXIMA.parameters).default([]),
  /** S/m of the perfect electric conductors, for wall losses by perturbation; absent: lossless. */
  wallConductivity: z.number().positive().max(1e12).optional(),
  edges: z.strictObject({ left: edgeSchema, right: edgeSchema, bottom: edgeSchema, top: edgeSchema }),
  media: z.array(mediumSchema).max(MAXIMA.media).default([]),
  paint: z.array(patchSchema).max(MAXIMA.patches).default([]),
  sources: z.array(sourceSchema).max(MAXIMA.sources).default([]),
  ports: z.array(portSchema).max(MAXIMA.ports).default([]),
  probes: z.array(probeSchema).max(MAXIMA.probes).default([]),
  limits: z.array(limitSchema).max(MAXIMA.limits).default([]),
  /** Left out: 60 dB and 1,000 periods of the band's upper edge. */
  stop: z.strictObject({ maxTimeNs: maxTimeNs.optional(), decayDb }).default({ decayDb: 60 }),
});

/** The filled-in document: every default stands in it, lengths are still as written. */
export const sceneSchema = sceneDocumentSchema.extend({ stop: z.strictObject({ maxTimeNs, decayDb }) });

/** What a person or program may write: defaults may be left out. */
export type SceneInput = z.input<typeof sceneDocumentSchema>;
/** A filled-in scene, lengths still numbers or expressions. Its canonical form is what is hashed. */
export type Scene = z.output<typeof sceneSchema>;
export type Mesh = z.output<typeof meshSchema>;
export type OutOfPlane = z.output<typeof outOfPlaneSchema>;
export type Parameter = z.output<typeof parameterSchema>;
export type Edge = z.output<typeof edgeSchema>;
export type EdgeName = keyof Scene["edges"];
export type Polarization = z.output<typeof polarizationSchema>;

/** Something wrong (or, in a list of warnings, doubtful) in a document, with where and what to do about it. */
export interface Problem {
  /** Where: `paint[3].points[0][1]`; empty for the document as a whole. */
  path: string;
  sentence: string;
  severity?: never;
}

/** The same document with every length evaluated: `number | string` becomes `number`, all else stays. */
export type Resolved<T> = [T] extends [string | number | undefined]
  ? number extends T
    ? number | Extract<T, undefined>
    : T
  : T extends object
    ? { [K in keyof T]: Resolved<T[K]> }
    : T;

type WithWaveform<T> = T extends { kind: "plane-wave" }
  ? Required<T>
  : T extends { waveform?: unknown }
    ? T & Required<Pick<T, "waveform">>
    : never;

export type ResolvedPatch = Resolved<Scene["paint"][number]>;
export type ResolvedAreaPatch = Exclude<ResolvedPatch, { kind: "wall" | "film" }>;
export type ResolvedLinePatch = Extract<ResolvedPatch, { kind: "wall" | "film" }>;
/** A source whose waveform and inset are filled in. */
export type ResolvedSource = WithWaveform<Resolved<Scene["sources"][number]>>;
export type ResolvedPort = Resolved<Scene["ports"][number]>;
export type ResolvedProbe = Resolved<Scene["probes"][number]>;

/** A scene ready for a solver: lengths are mm, parameters evaluated, default waveforms filled in. */
export interface ResolvedScene
  extends Omit<Scene, "parameters" | "section" | "paint" | "sources" | "ports" | "probes"> {
  section: { widthMm: number; heightMm: number };
  paint: ResolvedPatch[];
  sources: ResolvedSource[];
  ports: ResolvedPort[];
  probes: ResolvedProbe[];
  /** mm, by parameter name. */
  parameterValues: ReadonlyMap<string, number>;
  /** Every medium by id, with the built-in `air` and `pec`. */
  mediaById: ReadonlyMap<string, Medium>;
}
