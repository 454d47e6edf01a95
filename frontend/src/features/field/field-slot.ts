/**
 * The latest frame, outside React state. A frame that arrives before the last one was drawn replaces it, so nothing
 * queues; each frame's `settle` is called once, when it was drawn or replaced, and gives the sender its credit back.
 */
import type { Frame } from "@heddle/kernels/frames";

export interface FieldSlot {
  put(frame: Frame, settle: () => void): void;
  /** The frame last put, drawn or not. */
  latest(): Frame | null;
  /** The layer has drawn the latest frame. */
  drawn(): void;
  /** Forgets the frame, as when another run is watched. */
  clear(): void;
  /** Called at each `put` and `clear`; returns the way to stop. */
  subscribe(listener: () => void): () => void;
}

export function createFieldSlot(): FieldSlot {
  let frame: Frame | null = null;
  let pending: (() => void) | null = null;
  const listeners = new Set<() => void>();
  const settle = (): void => {
    const call = pending;
    pending = null;
    call?.();
  };
  const notify = (): void => {
    for (const listener of listeners) listener();
  };
  return {
    put(next, settleNext) {
      settle();
      frame = next;
      pending = settleNext;
      notify();
    },
    latest: () => frame,
    drawn: settle,
    clear() {
      settle();
      frame = null;
      notify();
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => {
        listeners.delete(listener);
      };
    },
  };
}
