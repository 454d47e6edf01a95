/** How many events a socket may send: a steady rate with room for a burst. */

export const EVENTS_PER_SECOND = 200;
const BURST = 400;
/** Events refused after which the socket is closed, unless it kept quiet long enough to have its burst back. */
const PATIENCE = 1_000;

export class EventAllowance {
  private left = BURST;
  private refused = 0;
  private atMs: number;

  constructor(private readonly now: () => number = () => performance.now()) {
    this.atMs = now();
  }

  /** Takes one event off the allowance. `hopeless`: so far over it that the socket is to be closed. */
  take(): "taken" | "over" | "hopeless" {
    const nowMs = this.now();
    this.left = Math.min(BURST, this.left + ((nowMs - this.atMs) / 1000) * EVENTS_PER_SECOND);
    this.atMs = nowMs;
    if (this.left === BURST) this.refused = 0;
    if (this.left >= 1) {
      this.left -= 1;
      return "taken";
    }
    this.refused += 1;
    return this.refused > PATIENCE ? "hopeless" : "over";
  }
}
