export * from "./errors.js";
export * from "./media.js";
export * from "./people.js";
export * from "./permissions.js";
export * from "./projects.js";
export * from "./runs.js";
export * from "./scenes.js";
export * from "./socket.js";
