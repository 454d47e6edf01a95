/** Plane waves on stacks of layers: closed-form, and so the independent check on slabs. */
export { stackResponse } from "./stack.js";
export type { Stack, StackElement, StackResponse, StackWave } from "./stack.js";
