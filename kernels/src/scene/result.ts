/** The result document of a run: what `solve` writes, the server keeps and the summary reads. */
import { z } from "zod";

const real = z.number();
const nullable = real.nullable();
/** Arrays of one probe, drive or port pair; null where a value is undefined. */
const curve = z.array(nullable);

/** The real time series, in the probe's unit, at the component's own sample times. */
export const traceSchema = z.strictObject({ startNs: real, stepNs: real, values: z.array(real) });

/** Per unit source: DFT of the trace over DFT of the waveform. */
export const complexSpectrumSchema = z.strictObject({
  GHz: z.array(real),
  re: curve,
  im: curve,
  /** The trace had not fallen by 40 dB at the stop and was completed by its fitted poles. */
  completed: z.boolean().optional(),
  /** The run stopped too early for it, with a warning: no limit is judged on it. */
  unfinished: z.boolean().optional(),
});
/** Time averages per unit source of power, absorption or energy. */
export const powerSpectrumSchema = z.strictObject({
  GHz: z.array(real),
  value: curve,
  electric: curve.optional(),
  magnetic: curve.optional(),
  /** Of an area, in V/m per unit source: |E| by area, and its largest. */
  meanField: curve.optional(),
  worstField: curve.optional(),
  /** The run stopped too early for it, with a warning: no limit is judged on it. */
  unfinished: z.boolean().optional(),
});

export const probeResultSchema = z.strictObject({
  id: z.string(),
  /** The driven port; null with sources. */
  drive: z.string().nullable(),
  kind: z.enum(["point", "line", "area"]),
  /** The field component of a point probe, else the probe's own quantity. */
  quantity: z.string(),
  unit: z.string(),
  trace: traceSchema,
  spectrum: z.union([complexSpectrumSchema, powerSpectrumSchema]).nullable(),
});

const portResultSchema = z.strictObject({
  GHz: z.array(real),
  /** Of an E-plane part of one fill: where in its guide, √(f² + f_c²), the figures at `GHz` hold. */
  guideGHz: z.array(real).optional(),
  s: z.array(z.strictObject({ to: z.string(), from: z.string(), re: curve, im: curve, groupDelayNs: curve })),
  /**
   * Pairs of ports, both driven, as impedance inverters: `k` is K/√(Z₁Z₂), at most 1; `phaseDeg` the φ at each of the two ports: with
   * lines of half that length added at the reference planes (negative: taken off) the part is the inverter. Null where more than 1 % of
   * the power goes elsewhere.
   */
  inverters: z
    .array(
      z.strictObject({
        between: z.tuple([z.string(), z.string()]),
        k: curve,
        phaseDeg: z.tuple([curve, curve]),
      }),
    )
    .optional(),
  passivity: z.strictObject({ worst: nullable, atGHz: nullable }),
});

export const resonanceSchema = z.strictObject({
  probe: z.string(),
  GHz: real,
  q: nullable,
  qWithPlates: nullable.optional(),
  levelDb: nullable,
  ghzUncertainty: nullable,
  qUncertainty: nullable,
});

const balanceSchema = z.strictObject({
  GHz: z.array(real),
  input: curve,
  absorbed: curve,
  leaving: curve,
  mismatch: curve,
});

/** Figures at zero cell size, each with its uncertainty, which is never below |fine − coarse| over what the order promises. */
const extrapolationSchema = z.strictObject({
  /** Coarse cell over fine cell. */
  ratio: real,
  /** The order in the cell size that the geometry promises. */
  order: real,
  /** False where the error may change its sign from mesh to mesh: the finer mesh's figures then stand, nothing is extrapolated. */
  steady: z.boolean(),
  probes: z.array(
    z.union([
      z.strictObject({
        id: z.string(),
        drive: z.string().nullable(),
        GHz: z.array(real),
        re: curve,
        im: curve,
        uncertainty: curve,
      }),
      z.strictObject({
        id: z.string(),
        drive: z.string().nullable(),
        GHz: z.array(real),
        value: curve,
        uncertainty: curve,
      }),
    ]),
  ),
  s: z.array(
    z.strictObject({
      to: z.string(),
      from: z.string(),
      GHz: z.array(real),
      re: curve,
      im: curve,
      uncertainty: curve,
    }),
  ),
  resonances: z.array(
    z.strictObject({
      probe: z.string(),
      GHz: real,
      ghzUncertainty: real,
      q: nullable,
      qUncertainty: nullable,
    }),
  ),
});

/** margin > 0: kept, in dB or in the unit of the limit's `value`. `holds` null: it could not be judged. */
export const limitResultSchema = z.strictObject({
  id: z.string(),
  holds: z.boolean().nullable(),
  margin: nullable,
  atGHz: nullable,
  uncertainty: nullable,
});

/**
 * Parts that a run did not compute are absent, never empty stand-ins: an absent `resonances` says "not looked
 * for", an empty one "none found".
 */
export const resultSchema = z.strictObject({
  format: z.literal("heddle-result"),
  version: z.literal(1),
  scene: z.strictObject({ name: z.string(), sha256: z.string() }),
  solver: z.strictObject({
    version: z.string(),
    engine: z.enum(["reference", "wasm"]),
    precision: z.enum(["f64", "f32"]),
  }),
  grid: z.strictObject({
    nx: z.number().int(),
    ny: z.number().int(),
    dxMm: real,
    dyMm: real,
    stepPs: real,
    steps: z.number().int(),
    /** Δt over the stability limit of the plain grid. */
    courant: real,
  }),
  stopped: z.strictObject({ reason: z.enum(["decay", "time", "cancelled"]), decayDb: nullable }),
  probes: z.array(probeResultSchema),
  ports: portResultSchema.optional(),
  resonances: z.array(resonanceSchema).optional(),
  shielding: z.array(z.strictObject({ probe: z.string(), GHz: z.array(real), dB: curve })).optional(),
  balance: balanceSchema.optional(),
  limits: z.array(limitResultSchema).optional(),
  extrapolation: extrapolationSchema.optional(),
  quality: z.strictObject({
    cellsPerWavelength: z.record(z.string(), real),
    /** Relative phase-velocity error, worst direction, at the band's upper edge in the slowest counted medium. */
    dispersionError: real,
    boundaryReflectionDb: nullable,
    /** Stored energy at the stop over its maximum. */
    energyLeft: nullable,
    warnings: z.array(z.string()),
  }),
  /** The edits of a run that was edited while it ran, by the step at which each took effect. */
  edits: z.array(z.strictObject({ step: z.number().int(), sceneSha256: z.string() })).optional(),
  /** The only part that may differ between two runs; the result hash leaves it out. */
  timing: z.strictObject({ seconds: real, cellStepsPerSecond: real, threads: z.number().int() }),
});

export type Trace = z.output<typeof traceSchema>;
export type ComplexSpectrum = z.output<typeof complexSpectrumSchema>;
export type PowerSpectrum = z.output<typeof powerSpectrumSchema>;
export type ProbeResult = z.output<typeof probeResultSchema>;
export type Resonance = z.output<typeof resonanceSchema>;
export type LimitResult = z.output<typeof limitResultSchema>;
export type SolveResult = z.output<typeof resultSchema>;
export type Extrapolation = z.output<typeof extrapolationSchema>;
