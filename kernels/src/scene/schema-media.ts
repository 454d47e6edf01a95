/** Media: perfect conductors, or ε, μ, σ, σ* and poles. */
import { z } from "zod";
import { MAXIMA } from "./limits.js";
import { frequencyGHzSchema, idSchema, nameSchema } from "./schema-values.js";

/** χ = Δ/(1 + jωτ). */
const debyePoleSchema = z.strictObject({
  kind: z.literal("debye"),
  delta: z.number().min(0).max(1e6),
  tauNs: z.number().positive().max(1e9),
});

/** χ = Δω₀²/(ω₀² − ω² + jωδ), with ω₀ and δ 2π times the keys' frequencies. */
const lorentzPoleSchema = z.strictObject({
  kind: z.literal("lorentz"),
  delta: z.number().min(0).max(1e6),
  resonanceGHz: frequencyGHzSchema,
  dampingGHz: z.number().min(0).max(MAXIMA.frequencyGHz),
});

export const poleSchema = z.discriminatedUnion("kind", [debyePoleSchema, lorentzPoleSchema]);
const polesSchema = z.array(poleSchema).max(MAXIMA.polesPerList).default([]);

/** An ideal conductor: tangential E (electric) or tangential H (magnetic) vanishes on it. */
export const perfectMediumSchema = z.strictObject({
  id: idSchema,
  name: nameSchema,
  perfect: z.enum(["electric", "magnetic"]),
});

/** ε and μ below 1 are refused: waves would outrun the time step, which is chosen for vacuum. */
export const fillMediumSchema = z.strictObject({
  id: idSchema,
  name: nameSchema,
  relativePermittivity: z.number().min(1).max(1e6).default(1),
  relativePermeability: z.number().min(1).max(1e6).default(1),
  /** σ in S/m. */
  conductivity: z.number().min(0).max(1e12).default(0),
  /** σ* in Ω/m. */
  magneticLoss: z.number().min(0).max(1e15).default(0),
  electricPoles: polesSchema,
  magneticPoles: polesSchema,
});

export const mediumSchema = z.union([perfectMediumSchema, fillMediumSchema]);

export type Pole = z.output<typeof poleSchema>;
export type PerfectMedium = z.output<typeof perfectMediumSchema>;
export type FillMedium = z.output<typeof fillMediumSchema>;
export type Medium = z.output<typeof mediumSchema>;

export const isPerfect = (medium: Medium): medium is PerfectMedium => "perfect" in medium;

export const hasPoles = ({ electricPoles, magneticPoles }: FillMedium): boolean =>
  electricPoles.length + magneticPoles.length > 0;

/** The media that exist without being listed. */
export const AIR: FillMedium = {
  id: "air",
  name: "Air",
  relativePermittivity: 1,
  relativePermeability: 1,
  conductivity: 0,
  magneticLoss: 0,
  electricPoles: [],
  magneticPoles: [],
};
export const PEC: PerfectMedium = { id: "pec", name: "Perfect electric conductor", perfect: "electric" };
export const BUILT_IN_MEDIA: readonly Medium[] = [AIR, PEC];
