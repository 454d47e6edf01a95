/** What looks at whole frames between two sweeps: area probes and the power balance. */
import { fourierSum } from "../analysis/index.js";
import type { Lattice } from "../lattice/index.js";
import type { LossyMedia } from "../observers/index.js";
import { AreaProbe, balanceSums, PowerBalance, sumsOf } from "../observers/index.js";
import type { ResolvedScene } from "../scene/index.js";
import type { Engine } from "../stepping/index.js";
import { ENVELOPE_LOOKS, FieldMaps } from "./field-maps.js";
import type { MapSpec } from "./field-maps.js";
import type { DrivePlan } from "./plan.js";

/** Frames are as frequent as what a drive excites more than this weakly (of its strongest) asks for. */
const UNHEARD = 1e-5;
/** A waveform with more samples is looked at at every step instead of searched. */
const LONGEST_SEARCH = 20_000;
const SEARCHED = 512;
/** A tone, which has no spectrum by frames, is looked at this often a period. */
const LOOKS_A_PERIOD = 20;
/** Area probes keep at most so many numbers in all; of more frequencies some are left out. */
const MOST_SUMS = 2e6;
/** The balance of a scene that does not ask for it is kept where it costs no more numbers than this, and frames are small. */
const CHEAP_BALANCE = 5e5;
const SMALL_FRAME = 5e4;
/** Frequencies of the balance. */
const BALANCE_FREQUENCIES = 11;

/** Steps from frame to frame, so that what is folded into frequencies up to `highestHz` was never excited. */
export function framesEvery(drives: DrivePlan, dt: number, highestHz: number, envelope = false): number {
  let excited = highestHz;
  for (const { waveform, offset } of drives.sources) {
    if (waveform.toneHz !== null) {
      excited = Math.max(excited, (LOOKS_A_PERIOD - 1) * waveform.toneHz);
      continue;
    }
    const count = Math.ceil(waveform.endSeconds / dt) + 1;
    if (count > LONGEST_SEARCH) return 1;
    const values = Float64Array.from({ length: count }, (_, n) => waveform.valueAt((n + offset) * dt));
    const frequencies = Array.from({ length: SEARCHED }, (_, n) => (0.5 * (n + 1)) / SEARCHED / dt);
    const sum = fourierSum({ start: 0, step: dt, values }, frequencies);
    const sizes = sum.re.map((re, n) => Math.hypot(re, sum.im[n]));
    const largest = sizes.reduce((most, size) => Math.max(most, size), 0);
    const last = sizes.reduce((found, size, n) => (size > UNHEARD * largest ? n : found), 0);
    excited = Math.max(excited, frequencies[Math.min(SEARCHED - 1, last + 1)]);
  }
  const looks = Math.floor(1 / ((excited + highestHz) * dt));
  return Math.max(1, envelope ? Math.min(looks, Math.floor(1 / (ENVELOPE_LOOKS * excited * dt))) : looks);
}

/** `count` of `length` indices, evenly, the first and the last among them. */
const evenly = (length: number, count: number): number[] =>
  count >= length
    ? Array.from({ length }, (_, n) => n)
    : [
        ...new Set(
          Array.from({ length: count }, (_, n) => Math.round((n * (length - 1)) / Math.max(1, count - 1))),
        ),
      ];

export interface AreaLook {
  probe: AreaProbe;
  frequenciesGHz: readonly number[];
}

export interface FrameInput {
  scene: ResolvedScene;
  engine: Engine;
  media: LossyMedia;
  drives: DrivePlan;
  frequenciesGHz: readonly number[];
  every: number;
  maps?: MapSpec | undefined;
}

export class FrameLooks {
  readonly every: number;
  readonly warnings: string[] = [];
  /** By number of the probe in the scene. */
  readonly areas: ReadonlyMap<number, AreaLook>;
  readonly balance: PowerBalance | null;
  readonly balanceGHz: readonly number[];
  readonly maps: FieldMaps | null;

  constructor(private readonly input: FrameInput) {
    const { frequenciesGHz, every } = input;
    this.every = every;
    const picks = evenly(frequenciesGHz.length, BALANCE_FREQUENCIES);
    this.balanceGHz = picks.map((index) => frequenciesGHz[index]);
    this.areas = this.areaLooks(picks);
    this.balance = this.makeBalance();
    const wanted = input.maps && (input.maps.envelope || input.maps.mapsGHz.length > 0);
    this.maps = input.maps && wanted ? new FieldMaps(input.engine.lattice, input.maps, every) : null;
  }

  private areaLooks(picks: readonly number[]): Map<number, AreaLook> {
    const { scene, engine, media, frequenciesGHz, every } = this.input;
    const looks = new Map<number, AreaLook>();
    const count = scene.probes.filter(({ kind }) => kind === "area").length;
    scene.probes.forEach((probe, index) => {
      if (probe.kind !== "area") return;
      const sums = sumsOf(engine, { box: probe, quantity: probe.quantity, media });
      const room = Math.max(1, Math.floor(MOST_SUMS / count / Math.max(1, sums)));
      const kept = evenly(frequenciesGHz.length, room);
      const indices =
        kept.length < frequenciesGHz.length ? [...new Set([...kept, ...picks])].sort((a, b) => a - b) : kept;
      const own = indices.map((n) => frequenciesGHz[n]);
      if (own.length < frequenciesGHz.length)
        this.warnings.push(
          `The area of "${probe.id}" is told at ${own.length} of the ${frequenciesGHz.length} frequencies: it has too many field points for more.`,
        );
      const frequenciesHz = own.map((frequency) => frequency * 1e9);
      const spec = { box: probe, media, quantity: probe.quantity, frequenciesHz, every };
      looks.set(index, { probe: new AreaProbe(engine, spec), frequenciesGHz: own });
    });
    return looks;
  }

  private makeBalance(): PowerBalance | null {
    const { engine, media, drives, every } = this.input;
    const tone = drives.sources.some(({ waveform }) => waveform.toneHz !== null);
    if (tone) return null;
    const asked = this.areas.size > 0;
    const sums = balanceSums(engine, media, drives.points, drives.signals) * this.balanceGHz.length;
    const small = engine.lattice.columns * engine.lattice.rows <= SMALL_FRAME;
    if (sums > (asked ? MOST_SUMS : CHEAP_BALANCE) || !(asked || small)) {
      if (asked)
        this.warnings.push("There is no power balance: too many field points of the section absorb for it.");
      return null;
    }
    const frequenciesHz = this.balanceGHz.map((frequency) => frequency * 1e9);
    return new PowerBalance(engine, {
      media,
      drives: drives.points,
      signals: drives.signals,
      frequenciesHz,
      every,
    });
  }

  /** Whether anything looks. */
  get needed(): boolean {
    return this.areas.size > 0 || this.balance !== null || this.maps !== null;
  }

  /** Steps from `step` to the next frame. */
  stepsToNext(step: number): number {
    return this.every - (step % this.every);
  }

  /**
   * Looks, where it is time to.
   *
   * @param signals those of the last steps, step-major
   */
  look(engine: Engine, signals: Float64Array): void {
    if (engine.step % this.every !== 0) return;
    const step = this.input.drives.firstStep + engine.step;
    for (const { probe } of this.areas.values()) probe.look(engine.fields, step);
    this.maps?.look(engine.fields, step);
    this.balance?.look(engine, step, signals, signals.length - this.input.drives.signals);
  }

  /** Takes the coefficients of an edited section. */
  refresh(engine: Engine): void {
    for (const { probe } of this.areas.values()) probe.refresh(engine);
  }

  save(): Float64Array {
    const parts = [...this.areas.values()].map(({ probe }) => probe.save());
    if (this.maps) parts.push(...this.maps.save());
    if (this.balance) parts.push(this.balance.save());
    const all = new Float64Array(parts.reduce((sum, { length }) => sum + length, 0));
    let at = 0;
    for (const part of parts) {
      all.set(part, at);
      at += part.length;
    }
    return all;
  }

  load(packed: Float64Array): void {
    let rest = packed;
    for (const { probe } of this.areas.values()) rest = probe.load(rest);
    if (this.maps) rest = this.maps.load(rest);
    this.balance?.load(rest);
  }
}

/** Frames to look at, or null where nothing does. */
export function frameLooks(input: FrameInput): FrameLooks | null {
  const looks = new FrameLooks(input);
  return looks.needed ? looks : null;
}

/** The highest frequency that a run's frames must hold. */
export const highestOf = (frequenciesGHz: readonly number[], lattice: Lattice): number =>
  Math.min(0.25 / lattice.dt, 1e9 * frequenciesGHz.reduce((most, frequency) => Math.max(most, frequency), 0));
