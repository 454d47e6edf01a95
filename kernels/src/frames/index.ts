/** Frames: what a viewer asks for, what the solver samples, and the codec between server and viewer. */
export * from "./codec.js";
export * from "./types.js";
