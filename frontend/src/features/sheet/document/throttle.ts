/** Runs at once, then at most once per interval, the last call always in the end. */
export class Throttle {
  readonly #intervalMs: number;
  #timer: ReturnType<typeof setTimeout> | null = null;
  #waiting: (() => void) | null = null;

  constructor(intervalMs: number) {
    this.#intervalMs = intervalMs;
  }

  run(job: () => void): void {
    if (this.#timer !== null) {
      this.#waiting = job;
      return;
    }
    job();
    this.#timer = setTimeout(() => {
      this.#timer = null;
      const waiting = this.#waiting;
      this.#waiting = null;
      if (waiting !== null) this.run(waiting);
    }, this.#intervalMs);
  }

  cancel(): void {
    if (this.#timer !== null) clearTimeout(this.#timer);
    this.#timer = null;
    this.#waiting = null;
  }
}
