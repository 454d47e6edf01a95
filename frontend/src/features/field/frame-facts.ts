import type { FieldQuantity } from "@heddle/kernels/frames";
import { useEffect, useState } from "react";
import type { FieldSlot } from "./field-slot";

/** What is written about the frame on the sheet: everything but its field. */
export interface FrameFacts {
  quantity: FieldQuantity;
  range: number;
  peak: number;
  step: number;
  timeNs: number;
}

const factsOf = (slot: FieldSlot): FrameFacts | null => {
  const frame = slot.latest();
  if (frame === null) return null;
  const { quantity, range, peak, step, timeNs } = frame;
  return { quantity, range, peak, step, timeNs };
};

/** The latest frame's facts, renewed at most once per `intervalMs`: people read figures slower than frames come. */
export function useFrameFacts(slot: FieldSlot, intervalMs = 150): FrameFacts | null {
  const [facts, setFacts] = useState(() => factsOf(slot));
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | null = null;
    const renew = (): void => {
      timer = null;
      setFacts(factsOf(slot));
    };
    renew();
    const leave = slot.subscribe(() => {
      timer ??= setTimeout(renew, intervalMs);
    });
    return () => {
      leave();
      if (timer !== null) clearTimeout(timer);
    };
  }, [slot, intervalMs]);
  return facts;
}
