/** The session: one engine, its scene, what it records, and when it ends. */
import { loadGenerators, saveGenerators } from "../drives/index.js";
import type {
  EnvelopeRequest,
  FieldQuantity,
  FieldSample,
  MapRequest,
  ViewRequest,
} from "../frames/index.js";
import type { Lattice } from "../lattice/index.js";
import type { SectionCoefficients } from "../media/index.js";
import { storedEnergy } from "../observers/index.js";
import type { ResolvedScene, Scene, SolveResult } from "../scene/index.js";
import { documentSha256, readScene, resolveScene, sceneSha256 } from "../scene/index.js";
import type { Engine } from "../stepping/index.js";
import { packBlocks, unpackBlocks } from "./blocks.js";
import { changedBox, clearingOverdamped, editProblems } from "./editing.js";
import { nonFiniteFailure } from "./failure.js";
import type { FrameLooks } from "./frame-looks.js";
import type { DrivePlan } from "./plan.js";
import { coefficientsOf, drivesOf } from "./plan.js";
import type { ProbePlan } from "./probe-plan.js";
import { loadSums, samplesOf, saveSums } from "./probe-plan.js";
import type { LegRecord } from "./leg-record.js";
import type { PortPlan } from "./port-plan.js";
import { buildResult } from "./result.js";
import { quantitiesOf, sampleQuantity } from "./sampling.js";
import { driveTransform } from "./spectra.js";
import type {
  AdvanceOutcome,
  EditLogEntry,
  EditOutcome,
  GridSummary,
  RunFailure,
  SessionSnapshot,
  SolveSession,
  StopReason,
  TraceIncrement,
} from "./session.js";
import { TraceStore } from "./trace-store.js";

/** Energy is looked at, and non-finite fields are found, at multiples of this many steps. */
export const CHECK_INTERVAL = 64;

/** S is a ratio at each frequency, and a port's pulse is weak at the ends of the band: its runs go on until this much less is left. */
const PORTS_FURTHER_DB = 10;

export interface SessionParts {
  scene: Scene;
  resolved: ResolvedScene;
  warnings: readonly string[];
  grid: GridSummary;
  engine: Engine;
  coefficients: SectionCoefficients;
  drives: DrivePlan;
  /** Null where sources drive. */
  ports: PortPlan | null;
  probes: ProbePlan;
  frequenciesGHz: readonly number[];
  /** Null where nothing looks at whole frames. */
  frames: FrameLooks | null;
}

/** What a snapshot says in words; the numbers follow in blocks. */
interface SnapshotHeader {
  openedSha256: string;
  engineText: string;
  step: number;
  samples: number;
  energy: number;
  energyMax: number;
  stopReason: StopReason | null;
  edits: EditLogEntry[];
  /** The scene as edited, where it was. */
  scene: Scene | null;
}

export class EngineSession implements SolveSession {
  readonly grid: GridSummary;
  readonly quantities: readonly FieldQuantity[];
  private readonly engine: Engine;
  private readonly lattice: Lattice;
  private readonly opened: Scene;
  private readonly openedSha256: string;
  private readonly parts: SessionParts;
  private readonly traces: TraceStore;
  private scene: Scene;
  private resolved: ResolvedScene;
  private drives: DrivePlan;
  private coefficients: SectionCoefficients;
  private editLog: EditLogEntry[] = [];
  private energy = 0;
  private energyMax = 0;
  private stopReason: StopReason | null = null;
  private failure: RunFailure | null = null;
  /** Signals of the steps since fields were last found finite. */
  private unchecked: Float64Array[] = [];
  private seconds = 0;
  private stepsTimed = 0;
  /** Steps of a run that was restored without its fields. */
  private stepsOver: number | null = null;

  constructor(parts: SessionParts) {
    this.parts = parts;
    this.grid = parts.grid;
    this.engine = parts.engine;
    this.lattice = parts.engine.lattice;
    this.opened = parts.scene;
    this.openedSha256 = sceneSha256(parts.scene);
    this.scene = parts.scene;
    this.resolved = parts.resolved;
    this.drives = parts.drives;
    this.coefficients = parts.coefficients;
    this.quantities = quantitiesOf(parts.resolved.polarization);
    this.traces = new TraceStore(parts.probes.samples, parts.grid.maxSteps);
  }

  get step(): number {
    return this.stepsOver ?? this.engine.step;
  }

  get timeNs(): number {
    return (this.drives.firstStep + this.step) * this.lattice.dt * 1e9;
  }

  get decayDb(): number {
    if (this.energyMax === 0) return 0;
    return 10 * Math.log10(Math.max(this.energy, Number.MIN_VALUE) / this.energyMax);
  }

  get edits(): readonly EditLogEntry[] {
    return this.editLog;
  }

  advance(steps: number): AdvanceOutcome {
    const started = performance.now();
    const first = this.engine.step;
    let left = Math.max(0, Math.floor(steps));
    while (left > 0 && !this.stopReason && !this.failure) {
      const toCheck = CHECK_INTERVAL - (this.engine.step % CHECK_INTERVAL);
      const toFrame = this.parts.frames?.stepsToNext(this.engine.step) ?? toCheck;
      const taken = Math.min(left, toCheck, toFrame, this.grid.maxSteps - this.engine.step);
      this.takeSteps(taken);
      left -= taken;
    }
    this.seconds += (performance.now() - started) / 1000;
    this.stepsTimed += this.engine.step - first;
    if (this.failure) return { kind: "failed", failure: this.failure };
    if (this.stopReason) return { kind: "ended", reason: this.stopReason };
    return { kind: "running" };
  }

  private takeSteps(steps: number): void {
    const { sources, signals: width, firstStep } = this.drives;
    const signals = new Float64Array(steps * width);
    let column = 0;
    for (const { generator } of sources) {
      generator.write(firstStep + this.engine.step, steps, signals, width, column);
      column += generator.signals;
    }
    const records = new Float64Array(steps * this.parts.probes.records);
    this.engine.advance(steps, signals, records);
    this.traces.append(samplesOf(this.parts.probes, records, steps), steps);
    this.parts.frames?.look(this.engine, signals);
    const atEnd = this.engine.step >= this.grid.maxSteps;
    this.unchecked.push(signals);
    if (this.engine.step % CHECK_INTERVAL === 0 || atEnd) this.check();
    if (atEnd && !this.failure) this.stopReason ??= "time";
  }

  private check(): void {
    const signals = this.unchecked;
    this.unchecked = [];
    this.energy = storedEnergy(this.engine);
    if (!Number.isFinite(this.energy)) {
      this.failure = nonFiniteFailure(this.engine, this.resolved, this.drives, signals);
      return;
    }
    this.energyMax = Math.max(this.energyMax, this.energy);
    const over = (this.drives.firstStep + this.engine.step) * this.lattice.dt > this.drives.endSeconds;
    const decayDb = this.resolved.stop.decayDb + (this.parts.ports ? PORTS_FURTHER_DB : 0);
    const floor = this.energyMax * 10 ** (-decayDb / 10);
    if (over && this.energyMax > 0 && this.energy <= floor) this.stopReason = "decay";
  }

  cancel(): void {
    this.stopReason ??= "cancelled";
  }

  tracesSince(from: number): TraceIncrement[] {
    const { probes } = this.parts.probes;
    const stepNs = this.lattice.dt * 1e9;
    return probes.map((probe, index) => {
      const values = this.samplesOf(index);
      const first = Math.min(Math.floor(from / probe.every), values.length);
      return {
        probe: probe.id,
        unit: probe.unit,
        startNs: (this.drives.firstStep + probe.firstSampleStep) * stepNs,
        stepNs: probe.every * stepNs,
        every: probe.every,
        from: first,
        values: values.slice(first),
      };
    });
  }

  /** Samples of one column so far; a view. */
  private samplesOf(column: number): Float64Array {
    return this.parts.frames?.areas.get(column)?.probe.values ?? this.traces.since(column, 0);
  }

  sampleField(request: ViewRequest): FieldSample {
    return sampleQuantity(this.engine, request);
  }

  sampleMap(request: MapRequest): FieldSample {
    const maps = this.parts.frames?.maps;
    if (!maps) throw new RangeError("The run keeps no maps.");
    const { dt } = this.lattice;
    const { step } = this;
    const drive = driveTransform({ drives: this.drives, dt, steps: step }, request.GHz * 1e9);
    return maps.sample(request, drive, step);
  }

  sampleEnvelope(request: EnvelopeRequest): FieldSample {
    const maps = this.parts.frames?.maps;
    if (!maps) throw new RangeError("The run keeps no envelope.");
    return maps.sampleEnvelope(request, this.step);
  }

  edit(scene: Scene): EditOutcome {
    const read = readScene(scene, { purpose: "run" });
    if (!read.ok) return { kind: "refused", problems: read.problems };
    const resolved = resolveScene(read.scene);
    const problems = editProblems(this.resolved, resolved, this.grid);
    if (problems.length > 0) return { kind: "refused", problems };
    this.apply(read.scene, resolved);
    const entry = { step: this.engine.step, sceneSha256: sceneSha256(read.scene) };
    this.editLog.push(entry);
    return { kind: "applied", step: entry.step };
  }

  /** Coefficients and drives of an edited scene from the next step on. */
  private apply(scene: Scene, resolved: ResolvedScene): void {
    const { lattice, engine } = this;
    const box = changedBox(this.resolved, resolved, lattice);
    if (box) {
      const previous = { coefficients: this.coefficients, box };
      this.coefficients = coefficientsOf(resolved, lattice, previous);
      const clearing = clearingOverdamped(engine, this.coefficients.row);
      engine.setRows(box.firstRow, box.lastRow, clearing);
      engine.setBranches(this.coefficients.branches);
      this.parts.frames?.refresh(engine);
    }
    // Ports drive as before: an edit keeps them.
    if (!this.parts.ports) this.drives = drivesOf(resolved, lattice, this.drives);
    engine.setDrives(this.drives.points, this.drives.signals);
    this.scene = scene;
    this.resolved = resolved;
  }

  /** What must agree for a snapshot to fit: everything that shapes the engine's arrays. */
  private engineText(): string {
    const { engine, lattice } = this;
    return documentSha256({
      engine: engine.name,
      precision: engine.precision,
      lattice: { ...lattice, edges: { ...lattice.edges } },
    });
  }

  /** @param of "record": of a run that is over, what its record is made of, without fields */
  snapshot(of: "run" | "record" = "run"): SessionSnapshot {
    const header: SnapshotHeader = {
      openedSha256: this.openedSha256,
      engineText: this.engineText(),
      step: this.step,
      samples: this.traces.length,
      energy: this.energy,
      energyMax: this.energyMax,
      stopReason: this.stopReason,
      edits: [...this.editLog],
      scene: this.editLog.length > 0 ? this.scene : null,
    };
    const traces = this.traces.save();
    const sums = saveSums(this.parts.probes.probes);
    const looks = this.parts.frames?.save() ?? new Float64Array(0);
    const driving = saveGenerators(this.drives.sources.map(({ generator }) => generator));
    const bytes = packBlocks(header, [
      of === "run" ? this.engine.save() : new Uint8Array(0),
      new Uint8Array(traces.buffer, traces.byteOffset, traces.byteLength),
      new Uint8Array(sums.buffer, sums.byteOffset, sums.byteLength),
      new Uint8Array(driving.buffer, driving.byteOffset, driving.byteLength),
      new Uint8Array(looks.buffer, looks.byteOffset, looks.byteLength),
    ]);
    return { version: 1, step: this.step, bytes };
  }

  restore(snapshot: SessionSnapshot): void {
    const { header, blocks } = unpackBlocks(snapshot.bytes);
    const words = header as SnapshotHeader;
    if (words.openedSha256 !== this.openedSha256)
      throw new RangeError("The snapshot belongs to another scene.");
    if (words.engineText !== this.engineText() || blocks.length !== 5) {
      throw new RangeError("The snapshot belongs to another grid, engine or precision.");
    }
    const scene = words.scene ?? this.opened;
    this.apply(scene, resolveScene(scene));
    const over = blocks[0].byteLength === 0;
    if (over) this.stepsOver = words.step;
    else this.engine.load(blocks[0]);
    this.traces.load(new Float64Array(blocks[1].slice().buffer), words.samples);
    loadSums(this.parts.probes.probes, new Float64Array(blocks[2].slice().buffer));
    loadGenerators(
      this.drives.sources.map(({ generator }) => generator),
      new Float64Array(blocks[3].slice().buffer),
    );
    this.parts.frames?.load(new Float64Array(blocks[4].slice().buffer));
    this.energy = words.energy;
    this.energyMax = words.energyMax;
    this.stopReason = words.stopReason;
    this.failure = null;
    this.editLog = [...words.edits];
  }

  result(): SolveResult {
    return buildResult([this.record()]);
  }

  /** What the result is made of; it stays when the engine is disposed of. */
  record(): LegRecord {
    const { engine, lattice } = this;
    return {
      scene: this.opened,
      sceneSha256: this.openedSha256,
      resolved: this.resolved,
      engine: { name: engine.name, precision: engine.precision, threads: engine.threads },
      lattice,
      grid: this.grid,
      steps: this.step,
      probes: this.parts.probes.probes,
      drives: this.drives,
      ports: this.parts.ports,
      frames: this.parts.frames,
      traces: (column) => this.samplesOf(column),
      frequenciesGHz: this.parts.frequenciesGHz,
      reason: this.stopReason ?? "cancelled",
      energy: this.energy,
      energyMax: this.energyMax,
      edits: this.editLog,
      warnings: [...this.parts.warnings, ...(this.parts.frames?.warnings ?? [])],
      seconds: this.seconds,
      cellSteps: (lattice.columns - 1) * (lattice.rows - 1) * this.stepsTimed,
    };
  }

  dispose(): void {
    this.engine.dispose();
  }
}
