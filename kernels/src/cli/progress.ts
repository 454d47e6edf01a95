/** A bar on a terminal: step, percentage, cell-steps a second, time left. */

const BAR_CELLS = 24;
const REFRESH_MS = 100;

export interface Terminal {
  isTTY?: boolean;
  write(text: string): unknown;
}

/** 90 → "1 min 30 s". */
export const formatSeconds = (seconds: number): string => {
  const whole = Math.max(0, Math.round(seconds));
  if (whole < 60) return `${String(whole)} s`;
  if (whole < 3600) return `${String(Math.floor(whole / 60))} min ${String(whole % 60)} s`;
  return `${String(Math.floor(whole / 3600))} h ${String(Math.floor((whole % 3600) / 60))} min`;
};

/** A bar that is full by a share (0…1). */
export const progressBar = (share: number): string => {
  const full = Math.round(Math.min(1, share) * BAR_CELLS);
  return `[${"█".repeat(full)}${"·".repeat(BAR_CELLS - full)}]`;
};

/** One line of progress. `cells` are the section's. The time left counts to the last possible step. */
export const progressLine = (step: number, maxSteps: number, cells: number, seconds: number): string => {
  const share = Math.min(1, step / maxSteps);
  const rate = seconds > 0 ? (step * cells) / seconds : 0;
  const left = step > 0 ? ((maxSteps - step) * seconds) / step : 0;
  return (
    `${progressBar(share)} step ${String(step)} of at most ${String(maxSteps)}` +
    `  ${String(Math.floor(share * 100))} %  ${(rate / 1e6).toFixed(1)} M cell-steps/s  ${formatSeconds(left)} left`
  );
};

/** Draws to a terminal and is silent elsewhere. */
export class Progress {
  readonly #started = performance.now();
  #drawn = Number.NEGATIVE_INFINITY;

  constructor(
    private readonly terminal: Terminal,
    private readonly maxSteps: number,
    private readonly cells: number,
  ) {}

  update(step: number): void {
    const now = performance.now();
    if (this.terminal.isTTY !== true || now - this.#drawn < REFRESH_MS) return;
    this.#drawn = now;
    // Carriage return and "erase to the end of the line".
    this.terminal.write(
      `\r\u001b[K${progressLine(step, this.maxSteps, this.cells, (now - this.#started) / 1000)}`,
    );
  }

  clear(): void {
    if (this.terminal.isTTY === true) this.terminal.write("\r\u001b[K");
  }
}
