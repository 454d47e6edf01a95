export { useResult } from "./api/runs";
export { EditedMark, RunPanel } from "./run-panel";
export type { FrameView } from "./run-stream";
export type { RunSinks } from "./use-run";
export { useRun } from "./use-run";
