/** A session without physics: every field value is the step's number, so that a spec can tell frames apart. */
import type { FieldSample, ViewRequest } from "@heddle/kernels/frames";
import type { SolveResult } from "@heddle/kernels/scene";
import type {
  AdvanceOutcome,
  EditLogEntry,
  EditOutcome,
  SessionSnapshot,
  SolveSession,
  StopReason,
  TraceIncrement,
} from "@heddle/kernels/solving";

export interface FakeOptions {
  maxSteps?: number;
  /** The step at which the field grows past every bound. */
  failsAt?: number;
  /** Thrown by `advance` at the first step. */
  throws?: Error;
  /** What an edit is refused for. */
  refusesEdits?: string;
  /** The result's trace has this many samples, sample i being sin(i). */
  resultSamples?: number;
}

export class FakeSession implements SolveSession {
  readonly grid;
  readonly quantities = ["Ez", "Hx", "Hy", "absE", "absH", "energyDensity", "lossDensity"] as const;
  readonly edits: EditLogEntry[] = [];
  step = 0;
  private reason: StopReason | null = null;

  constructor(private readonly options: FakeOptions = {}) {
    const maxSteps = options.maxSteps ?? 1_000_000_000;
    this.grid = { nx: 40, ny: 30, dxMm: 1, dyMm: 1, stepPs: 2, courant: 0.99, maxSteps };
  }

  get timeNs(): number {
    return this.step * this.grid.stepPs * 1e-3;
  }

  get decayDb(): number {
    return -this.step * 1e-6;
  }

  advance(steps: number): AdvanceOutcome {
    if (this.options.throws !== undefined) throw this.options.throws;
    this.step = Math.min(this.step + steps, this.grid.maxSteps);
    const { failsAt } = this.options;
    if (failsAt !== undefined && this.step >= failsAt) {
      return {
        kind: "failed",
        failure: { code: "non-finite", sentence: "The field grew past every bound." },
      };
    }
    if (this.step < this.grid.maxSteps) return { kind: "running" };
    this.reason = "time";
    return { kind: "ended", reason: this.reason };
  }

  cancel(): void {
    this.reason = "cancelled";
  }

  /** One probe whose sample i has the value i / 3; no more than a thousand of them. */
  tracesSince(from: number): TraceIncrement[] {
    const until = Math.min(this.step, 1_000);
    const values = Float64Array.from({ length: Math.max(0, until - from) }, (_, index) => (from + index) / 3);
    return [{ probe: "inside", unit: "V/m", startNs: 0, stepNs: this.grid.stepPs * 1e-3, from, values }];
  }

  sampleField(request: ViewRequest): FieldSample {
    const width = Math.min(request.width, this.grid.nx);
    const height = Math.min(request.height, this.grid.ny);
    const values = new Float32Array(width * height).fill(this.step);
    return { quantity: request.quantity, width, height, values, step: this.step, timeNs: this.timeNs };
  }

  edit(): EditOutcome {
    const { refusesEdits } = this.options;
    if (refusesEdits !== undefined) {
      return { kind: "refused", problems: [{ path: "paint", sentence: refusesEdits }] };
    }
    this.edits.push({ step: this.step, sceneSha256: "0".repeat(64) });
    return { kind: "applied", step: this.step };
  }

  snapshot(): SessionSnapshot {
    return { version: 1, step: this.step, bytes: new Uint8Array() };
  }

  restore(snapshot: SessionSnapshot): void {
    this.step = snapshot.step;
  }

  result(): SolveResult {
    const trace = this.tracesSince(0).at(0);
    const { nx, ny, dxMm, dyMm, stepPs, courant } = this.grid;
    const { resultSamples } = this.options;
    const values =
      resultSamples === undefined
        ? Array.from(trace?.values ?? [])
        : Array.from({ length: resultSamples }, (_, index) => Math.sin(index));
    return {
      format: "heddle-result",
      version: 1,
      scene: { name: "Fake", sha256: "0".repeat(64) },
      solver: { version: "0", engine: "reference", precision: "f64" },
      grid: { nx, ny, dxMm, dyMm, stepPs, steps: this.step, courant },
      stopped: { reason: this.reason ?? "cancelled", decayDb: this.decayDb },
      probes: [
        {
          id: "inside",
          drive: null,
          kind: "point",
          quantity: "Ez",
          unit: "V/m",
          trace: { startNs: 0, stepNs: stepPs * 1e-3, values },
          spectrum: null,
        },
      ],
      quality: {
        cellsPerWavelength: { air: 20 },
        dispersionError: 1e-3,
        boundaryReflectionDb: null,
        energyLeft: 1e-6,
        warnings: [],
      },
      timing: { seconds: 1, cellStepsPerSecond: 1, threads: 1 },
    };
  }

  dispose(): void {
    // Holds nothing.
  }
}
