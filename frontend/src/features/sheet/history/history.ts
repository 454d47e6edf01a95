import type { Scene } from "@heddle/kernels/scene";
import { applyDiff, invertDiff, isEmptyDiff, type SceneDiff } from "../document/scene-diff";

export interface HistoryStep {
  /** What the user did, as a menu would say it: "Move 3 items". */
  label: string;
  diff: SceneDiff;
}

/** Undo and redo without end. One finished gesture is one step. */
export class History {
  readonly #done: HistoryStep[] = [];
  #undone: HistoryStep[] = [];

  get canUndo(): boolean {
    return this.#done.length > 0;
  }
  get canRedo(): boolean {
    return this.#undone.length > 0;
  }
  get undoLabel(): string | null {
    return this.#done.at(-1)?.label ?? null;
  }
  get redoLabel(): string | null {
    return this.#undone.at(-1)?.label ?? null;
  }
  get depth(): number {
    return this.#done.length;
  }

  /** Keeps a step that has already been made; what was undone before it is given up. */
  push(step: HistoryStep): void {
    if (isEmptyDiff(step.diff)) return;
    this.#done.push(step);
    this.#undone = [];
  }

  /** The scene before the last step, or null where there is none. */
  undo(scene: Scene): Scene | null {
    const step = this.#done.pop();
    if (step === undefined) return null;
    this.#undone.push(step);
    return applyDiff(scene, invertDiff(step.diff));
  }

  redo(scene: Scene): Scene | null {
    const step = this.#undone.pop();
    if (step === undefined) return null;
    this.#done.push(step);
    return applyDiff(scene, step.diff);
  }

  clear(): void {
    this.#done.length = 0;
    this.#undone = [];
  }
}
