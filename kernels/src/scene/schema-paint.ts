/** Patches: areas of a medium, painted in order, and lines (walls, films) that lie over all areas. */
import { z } from "zod";
import { angleSchema, idSchema, lengthSchema, pointSchema } from "./schema-values.js";

const shield = z.boolean().optional();
const area = { id: idSchema, medium: idSchema, shield };

/** x, y: lower-left corner before turning about the centre. */
export const rectangleSchema = z.strictObject({
  kind: z.literal("rectangle"),
  ...area,
  x: lengthSchema,
  y: lengthSchema,
  width: lengthSchema,
  height: lengthSchema,
  angle: angleSchema.default(0),
});

/** x, y: centre. */
export const ellipseSchema = z.strictObject({
  kind: z.literal("ellipse"),
  ...area,
  x: lengthSchema,
  y: lengthSchema,
  rx: lengthSchema,
  ry: lengthSchema,
  angle: angleSchema.default(0),
});

/** Even-odd over the outline and all holes. */
export const polygonSchema = z.strictObject({
  kind: z.literal("polygon"),
  ...area,
  points: z.array(pointSchema).min(3),
  holes: z.array(z.array(pointSchema).min(3)).default([]),
});

/** A brush stroke with round ends and joints. */
export const strokeSchema = z.strictObject({
  kind: z.literal("stroke"),
  ...area,
  points: z.array(pointSchema).min(1),
  widthMm: lengthSchema,
});

/** An infinitely thin perfect electric conductor. */
export const wallSchema = z.strictObject({
  kind: z.literal("wall"),
  id: idSchema,
  shield,
  points: z.array(pointSchema).min(2),
});

/** An infinitely thin resistive film. */
export const filmSchema = z.strictObject({
  kind: z.literal("film"),
  id: idSchema,
  shield,
  points: z.array(pointSchema).min(2),
  ohmsPerSquare: z.number().positive().max(1e9),
});

export const patchSchema = z.discriminatedUnion("kind", [
  rectangleSchema,
  ellipseSchema,
  polygonSchema,
  strokeSchema,
  wallSchema,
  filmSchema,
]);

export type Patch = z.output<typeof patchSchema>;
export type AreaPatch = Exclude<Patch, { kind: "wall" | "film" }>;
export type LinePatch = Extract<Patch, { kind: "wall" | "film" }>;
