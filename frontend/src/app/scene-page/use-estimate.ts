import type { CostEstimate, Grid, Scene } from "@heddle/kernels/scene";
import { estimateCost, gridOf, resolveScene, SceneError } from "@heddle/kernels/scene";
import { useDeferredValue, useMemo } from "react";

export interface Estimate {
  grid: Grid;
  cost: CostEstimate;
}

/** What a run of the drawing would cost; null while a length in it has no value. Lags behind a stroke under way. */
export function useEstimate(document: Scene): Estimate | null {
  const settled = useDeferredValue(document);
  return useMemo(() => {
    try {
      const scene = resolveScene(settled);
      return { grid: gridOf(scene), cost: estimateCost(scene) };
    } catch (error) {
      if (error instanceof SceneError || error instanceof RangeError) return null;
      throw error;
    }
  }, [settled]);
}
