/** The scene document: its schema, how it is read, resolved, meshed, hashed and compared, and the result's schema. */
export * from "./limits.js";
export * from "./result.js";
export * from "./schema.js";
export * from "./schema-drives.js";
export * from "./schema-media.js";
export * from "./schema-paint.js";
export * from "./schema-values.js";
