/** How many steps are due: as many as fit into a slice of wall time, or as many as the asked pace allows. */

/** Wall time of one chunk of steps: short enough that a message waits no longer, long enough to be worth a call. */
export const CHUNK_MS = 10;
const MAX_STEPS_PER_CHUNK = 20_000;

/** Sizes chunks by the measured speed, so that each takes about `CHUNK_MS` whatever the lattice. */
export class ChunkSize {
  private stepsPerMs = 0;

  steps(): number {
    if (this.stepsPerMs === 0) return 1;
    return Math.min(MAX_STEPS_PER_CHUNK, Math.max(1, Math.round(this.stepsPerMs * CHUNK_MS)));
  }

  measured(steps: number, ms: number): void {
    if (steps < 1) return;
    const now = steps / Math.max(ms, 0.01);
    this.stepsPerMs = this.stepsPerMs === 0 ? now : 0.7 * this.stepsPerMs + 0.3 * now;
  }
}

/** Field time against wall time. Where the machine cannot hold the pace, what it falls behind is forgiven. */
export class Pace {
  private picosecondsPerSecond: number | null = null;
  private anchorMs = 0;
  private paidPs = 0;

  constructor(private readonly stepPs: number) {}

  /** From now on; null: as fast as it goes. */
  set(picosecondsPerSecond: number | null, nowMs: number): void {
    this.picosecondsPerSecond = picosecondsPerSecond;
    this.restart(nowMs);
  }

  /** Forgets time that passed without stepping (a pause). */
  restart(nowMs: number): void {
    this.anchorMs = nowMs;
    this.paidPs = 0;
  }

  /** Steps due now, at most `most`; 0 and the wait in ms where it is too early. */
  due(most: number, nowMs: number): { steps: number; waitMs: number } {
    if (this.picosecondsPerSecond === null) return { steps: most, waitMs: 0 };
    const owedPs = ((nowMs - this.anchorMs) / 1000) * this.picosecondsPerSecond - this.paidPs;
    const steps = Math.floor(owedPs / this.stepPs + 1e-9);
    if (steps < 1) {
      const waitMs = ((this.stepPs - owedPs) / this.picosecondsPerSecond) * 1000;
      return { steps: 0, waitMs: Math.max(1, waitMs) };
    }
    if (steps > most) this.paidPs += (steps - most) * this.stepPs;
    return { steps: Math.min(steps, most), waitMs: 0 };
  }

  paid(steps: number): void {
    this.paidPs += steps * this.stepPs;
  }
}
