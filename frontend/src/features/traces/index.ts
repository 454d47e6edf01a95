export { SpectrumPanel } from "./spectrum-panel";
export { TracePanel } from "./trace-panel";
export type { TraceStore } from "./trace-store";
export { createTraceStore } from "./trace-store";
