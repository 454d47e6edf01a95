export { SpectrumPanel } from "./spectrum-panel";
export { TracePanel } from "./trace-panel";
export { createTraceStore } from "./trace-store";
