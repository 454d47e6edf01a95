/** Ports and plane waves: what can be said about them from the drawing alone, before any mesh. */
import { distanceToLineMm, mediumAt } from "./contains.js";
import { meshCellMm } from "./grid.js";
import type { EdgeName, Problem, ResolvedPort, ResolvedScene } from "./schema.js";
import { isPerfect } from "./schema-media.js";
import type { Medium } from "./schema-media.js";

/** Lines and boundaries are looked at in this many places. */
const LOOKS = 64;

const isPlain = (medium: Medium | undefined): boolean =>
  medium !== undefined &&
  !isPerfect(medium) &&
  medium.conductivity === 0 &&
  medium.magneticLoss === 0 &&
  medium.electricPoles.length === 0 &&
  medium.magneticPoles.length === 0;

const BEHIND: Readonly<Record<ResolvedPort["inward"], { edge: EdgeName; x: number; y: number }>> = {
  "+x": { edge: "left", x: -1, y: 0 },
  "-x": { edge: "right", x: 1, y: 0 },
  "+y": { edge: "bottom", x: 0, y: -1 },
  "-y": { edge: "top", x: 0, y: 1 },
};

/** Whether a perfect electric wall lies within `reach` of (x, y), looking outward along (ux, uy). */
const endsOnMetal = (
  scene: ResolvedScene,
  x: number,
  y: number,
  ux: number,
  uy: number,
  reach: number,
): boolean => {
  const { widthMm, heightMm } = scene.section;
  const edges: [boolean, EdgeName][] = [
    [x <= reach && ux < 0, "left"],
    [x >= widthMm - reach && ux > 0, "right"],
    [y <= reach && uy < 0, "bottom"],
    [y >= heightMm - reach && uy > 0, "top"],
  ];
  if (edges.some(([near, edge]) => near && scene.edges[edge] === "electric")) return true;
  const medium = mediumAt(scene, x + ux * reach, y + uy * reach);
  if (medium !== undefined && isPerfect(medium) && medium.perfect === "electric") return true;
  return scene.paint.some((patch) => patch.kind === "wall" && distanceToLineMm(x, y, patch.points) <= reach);
};

const portProblems = (scene: ResolvedScene, port: ResolvedPort, path: string): Problem[] => {
  const [x1, y1] = port.from;
  const [x2, y2] = port.to;
  if ([x1, y1, x2, y2].some((value) => Number.isNaN(value))) return [];
  const length = Math.hypot(x2 - x1, y2 - y1);
  const behind = BEHIND[port.inward];
  const along: readonly [number, number] = behind.x !== 0 ? [0, Math.sign(y2 - y1)] : [Math.sign(x2 - x1), 0];
  const skew = behind.x !== 0 ? x1 !== x2 || y1 === y2 : y1 !== y2 || x1 === x2;
  if (skew)
    return [
      {
        path,
        sentence: `The line from (${String(x1)}, ${String(y1)}) to (${String(x2)}, ${String(y2)}) mm does not run across a guide along ${port.inward}; it must be ${behind.x !== 0 ? "vertical" : "horizontal"} and have a length.`,
      },
    ];
  const problems: Problem[] = [];
  const reach = meshCellMm(scene) / 2;
  const ends = [
    { at: port.from, sign: -1, name: "from" },
    { at: port.to, sign: 1, name: "to" },
  ];
  for (const { at, sign, name } of ends)
    if (!endsOnMetal(scene, at[0], at[1], sign * along[0], sign * along[1], reach))
      problems.push({
        path: `${path}.${name}`,
        sentence: `The port does not end on an electric wall at (${String(at[0])}, ${String(at[1])}) mm; let it run from wall to wall of its guide.`,
      });
  if (scene.edges[behind.edge] !== "absorbing")
    problems.push({
      path: `${path}.inward`,
      sentence: `Behind the port the ${behind.edge} edge is ${scene.edges[behind.edge]}; the guide must run on to an absorbing edge.`,
    });
  const media = new Set<Medium | undefined>();
  const depth =
    behind.x !== 0
      ? behind.x < 0
        ? x1
        : scene.section.widthMm - x1
      : behind.y < 0
        ? y1
        : scene.section.heightMm - y1;
  for (let i = 0; i < LOOKS; i++)
    for (let j = 0; j < 16; j++) {
      const s = ((i + 0.5) / LOOKS) * length;
      const d = ((j + 0.5) / 16) * depth;
      media.add(mediumAt(scene, x1 + along[0] * s + behind.x * d, y1 + along[1] * s + behind.y * d));
    }
  const [only] = media;
  if (media.size > 1 || !isPlain(only))
    problems.push({
      path,
      sentence:
        "Along the port and behind it the guide must be filled by one lossless, non-dispersive medium out to the edge; move the port or what stands there.",
    });
  return problems;
};

const planeWaveProblems = (scene: ResolvedScene, insetMm: number, path: string): Problem[] => {
  const problems: Problem[] = [];
  const { widthMm, heightMm } = scene.section;
  for (const edge of ["left", "right", "bottom", "top"] as const)
    if (scene.edges[edge] !== "absorbing")
      problems.push({
        path: `edges.${edge}`,
        sentence: `A plane wave needs absorbing edges all round; the ${edge} edge is ${scene.edges[edge]}.`,
      });
  if (Number.isNaN(insetMm)) return problems;
  if (insetMm <= 0 || 2 * insetMm >= Math.min(widthMm, heightMm))
    return [
      ...problems,
      {
        path: `${path}.insetMm`,
        sentence: `An inset of ${String(insetMm)} mm leaves no box in the section; choose one above 0 and under half the shorter side.`,
      },
    ];
  const background = scene.mediaById.get(scene.background);
  const corners: readonly (readonly [number, number])[] = [
    [insetMm, insetMm],
    [widthMm - insetMm, insetMm],
    [widthMm - insetMm, heightMm - insetMm],
    [insetMm, heightMm - insetMm],
  ];
  const boundary = corners.flatMap(([x1, y1], side) => {
    const [x2, y2] = corners[(side + 1) % 4];
    return Array.from({ length: LOOKS }, (_, index): [number, number] => [
      x1 + ((x2 - x1) * index) / LOOKS,
      y1 + ((y2 - y1) * index) / LOOKS,
    ]);
  });
  const lines = scene.paint.filter((patch) => patch.kind === "wall" || patch.kind === "film");
  const spacing = Math.max(widthMm, heightMm) / LOOKS / 2;
  const clear =
    isPlain(background) &&
    boundary.every(([x, y]) => mediumAt(scene, x, y) === background) &&
    !lines.some((line) => boundary.some(([x, y]) => distanceToLineMm(x, y, line.points) < spacing));
  if (!clear)
    problems.push({
      path,
      sentence: `The box of the plane wave, ${String(insetMm)} mm inside the section, must run through lossless, non-dispersive background alone; move what crosses it or change insetMm.`,
    });
  return problems;
};

/** Sources or ports but never both; ports across guides; plane waves in open background. */
export const checkDrives = (scene: ResolvedScene): Problem[] => {
  const both: Problem[] =
    scene.sources.length > 0 && scene.ports.length > 0
      ? [
          {
            path: "ports",
            sentence:
              "A scene is driven by sources or by ports, never by both; remove the ones or the others.",
          },
        ]
      : [];
  return [
    ...both,
    ...scene.ports.flatMap((port, index) => portProblems(scene, port, `ports[${String(index)}]`)),
    ...scene.sources.flatMap((source, index) =>
      source.kind === "plane-wave"
        ? planeWaveProblems(scene, source.insetMm, `sources[${String(index)}]`)
        : [],
    ),
  ];
};
