/** The scene document: its schema, how it is read, resolved, meshed, hashed and compared, and the result's schema. */
export * from "./limits.js";
export * from "./result.js";
export * from "./schema.js";
export * from "./schema-drives.js";
export * from "./schema-media.js";
export * from "./schema-paint.js";
export * from "./schema-values.js";
export {
  type CostEstimate,
  cellsPerWavelength,
  countedWavelengthsMm,
  COURANT,
  estimateCost,
  fillMediaInUse,
  type Grid,
  gridOf,
  layerCells,
  opensGuide,
  shortestWavelengthMm,
} from "./grid.js";
export { hasConformalMetal } from "./metal-cuts.js";
export { type MetalCorner, metalCorners } from "./metal-corners.js";
export { canonicalJson, documentSha256, resultSha256, sceneSha256 } from "./hash.js";
export * from "./media-figures.js";
export { CORNER_CELLS, type MeshPromise, meshPromise } from "./mesh-order.js";
export { mediumAt, patchContains } from "./contains.js";
export { evaluateExpression, type Evaluation } from "./expressions.js";
export * from "./features.js";
export { type Migration, MIGRATIONS } from "./migrations.js";
export { type ReadOptions, type ReadOutcome, readScene } from "./read.js";
export { defaultWaveform, resolveScene, SceneError } from "./resolve.js";
export { type SceneChange, sceneDiff } from "./diff.js";
export { sceneJsonSchema } from "./json-schema.js";
