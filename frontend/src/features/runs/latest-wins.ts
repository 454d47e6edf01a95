/**
 * Sends the newest value, one at a time and not more often than every `intervalMs`; values that were overtaken before
 * they could be sent are dropped.
 */
export interface LatestWins<T> {
  push(value: T): void;
  /** Drops what has not been sent. */
  cancel(): void;
}

/** @param send never rejects: it tells its own failures */
export function createLatestWins<T>(send: (value: T) => Promise<void>, intervalMs: number): LatestWins<T> {
  let waiting: { value: T } | null = null;
  let busy = false;
  let generation = 0;
  const next = async (mine: number): Promise<void> => {
    busy = true;
    while (waiting !== null && mine === generation) {
      const { value } = waiting;
      waiting = null;
      await Promise.all([send(value), new Promise((resolve) => setTimeout(resolve, intervalMs))]);
    }
    if (mine === generation) busy = false;
  };
  return {
    push(value) {
      waiting = { value };
      if (!busy) void next(generation);
    },
    cancel() {
      waiting = null;
      generation += 1;
      busy = false;
    },
  };
}
