import type { PointMm } from "../../hooks/viewport";

/** The place under the pointer, apart from React, so that only the read-out renders as it moves. */
export interface HoverStore {
  set: (at: PointMm | null) => void;
  get: () => PointMm | null;
  subscribe: (listener: () => void) => () => void;
}

export function createHoverStore(): HoverStore {
  let at: PointMm | null = null;
  const listeners = new Set<() => void>();
  return {
    set(next) {
      at = next;
      for (const listener of listeners) listener();
    },
    get: () => at,
    subscribe(listener) {
      listeners.add(listener);
      return () => {
        listeners.delete(listener);
      };
    },
  };
}
