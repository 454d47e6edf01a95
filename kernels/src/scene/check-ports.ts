/** Ports: what can be said about them from the drawing alone, before any mesh. */
import { distanceToLineMm, mediumAt } from "./contains.js";
import type { Findings } from "./check-mesh.js";
import { meshCellMm } from "./grid.js";
import { SPEED_OF_LIGHT } from "./media-figures.js";
import type { EdgeName, Problem, ResolvedPort, ResolvedScene } from "./schema.js";
import { isPerfect } from "./schema-media.js";
import type { FillMedium, Medium } from "./schema-media.js";

/** Lines are looked at in this many places across and along the guide. */
const LOOKS_ACROSS = 64;
const LOOKS_ALONG = 16;
/** Cells of guide that a port needs before the edge; on the edge itself it is computed so far inside. */
const LEAST_CELLS = 2;
/** Half a wave of the mode across the guide needs this many cells. */
const CELLS_A_HALF_WAVE = 2;

/** A medium in which waves travel without loss or memory. */
export const isPlain = (medium: Medium | undefined): medium is FillMedium =>
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

/** The guide from a port's line out to the edge, in mm. */
interface GuideBehind {
  left: number;
  right: number;
  bottom: number;
  top: number;
}

const guideBehind = (scene: ResolvedScene, port: ResolvedPort): GuideBehind => {
  const { widthMm, heightMm } = scene.section;
  const least = LEAST_CELLS * meshCellMm(scene);
  const [x, y] = port.from;
  const across = {
    left: Math.min(x, port.to[0]),
    right: Math.max(x, port.to[0]),
    bottom: Math.min(y, port.to[1]),
    top: Math.max(y, port.to[1]),
  };
  switch (port.inward) {
    case "+x":
      return { ...across, left: 0, right: Math.max(x, least) };
    case "-x":
      return { ...across, left: Math.min(x, widthMm - least), right: widthMm };
    case "+y":
      return { ...across, bottom: 0, top: Math.max(y, least) };
    case "-y":
      return { ...across, bottom: Math.min(y, heightMm - least), top: heightMm };
  }
};

/** Whether a segment enters a box that is made smaller by `margin` (A. Liang's and B. Barsky's clipping, derived here). */
const enters = (
  [x1, y1]: readonly [number, number],
  [x2, y2]: readonly [number, number],
  box: GuideBehind,
  margin: number,
): boolean => {
  let [from, to] = [0, 1];
  const sides: readonly (readonly [number, number])[] = [
    [x1 - x2, x1 - box.left - margin],
    [x2 - x1, box.right - margin - x1],
    [y1 - y2, y1 - box.bottom - margin],
    [y2 - y1, box.top - margin - y1],
  ];
  for (const [step, room] of sides) {
    if (step === 0 && room <= 0) return false;
    if (step < 0) from = Math.max(from, room / step);
    if (step > 0) to = Math.min(to, room / step);
  }
  return from < to;
};

/** Thin lines inside the guide, more than `reach` from its walls. */
const linesInside = (scene: ResolvedScene, box: GuideBehind, reach: number): boolean =>
  scene.paint.some(
    (patch) =>
      (patch.kind === "wall" || patch.kind === "film") &&
      patch.points.some((point, at) => at > 0 && enters(patch.points[at - 1], point, box, reach)),
  );

interface LineFrame {
  port: ResolvedPort;
  path: string;
  /** mm, and the unit vector from `from` to `to`. */
  length: number;
  along: readonly [number, number];
  behind: (typeof BEHIND)[ResolvedPort["inward"]];
  box: GuideBehind;
  reach: number;
}

/** Both ends on electric walls, at the line and behind it. */
const wallProblems = (scene: ResolvedScene, frame: LineFrame): Problem[] => {
  const { port, path, along, behind, box, reach } = frame;
  const depth = behind.x !== 0 ? box.right - box.left : box.top - box.bottom;
  const ends = [
    { at: port.from, sign: -1, name: "from" },
    { at: port.to, sign: 1, name: "to" },
  ] as const;
  return ends.flatMap(({ at: [x, y], sign, name }): Problem[] => {
    const closed = (d: number): boolean =>
      endsOnMetal(scene, x + behind.x * d, y + behind.y * d, sign * along[0], sign * along[1], reach);
    const where = `(${String(x)}, ${String(y)}) mm`;
    if (!closed(0))
      return [
        {
          path: `${path}.${name}`,
          sentence: `The port does not end on an electric wall at ${where}; let it run from wall to wall of its guide.`,
        },
      ];
    const open = Array.from({ length: LOOKS_ALONG }, (_, n) => ((n + 0.5) / LOOKS_ALONG) * depth).some(
      (d) => !closed(Math.min(d, depth)),
    );
    return open
      ? [
          {
            path: `${path}.${name}`,
            sentence: `The electric wall at ${where} does not run on behind the port; let the guide go on unchanged to the ${behind.edge} edge.`,
          },
        ]
      : [];
  });
};

/** The one medium of the guide; undefined where it has several or an unsuitable one. */
const guideMedium = (scene: ResolvedScene, { box, behind }: LineFrame): FillMedium | undefined => {
  const media = new Set<Medium | undefined>();
  const [nx, ny] = behind.x !== 0 ? [LOOKS_ALONG, LOOKS_ACROSS] : [LOOKS_ACROSS, LOOKS_ALONG];
  for (let i = 0; i < nx; i++)
    for (let j = 0; j < ny; j++) {
      const x = box.left + ((i + 0.5) / nx) * (box.right - box.left);
      const y = box.bottom + ((j + 0.5) / ny) * (box.top - box.bottom);
      media.add(mediumAt(scene, x, y));
    }
  const [only] = media;
  return media.size === 1 && isPlain(only) ? only : undefined;
};

/** f_c = m·c/(2w√(εμ)) in GHz, of the mode m between plates w mm apart. */
const cutoffGHz = (port: ResolvedPort, medium: FillMedium, widthMm: number): number =>
  (port.mode * SPEED_OF_LIGHT * 1e-6) /
  (2 * widthMm * Math.sqrt(medium.relativePermittivity * medium.relativePermeability));

const portFindings = (scene: ResolvedScene, port: ResolvedPort, path: string): Findings => {
  const none: Findings = { problems: [], warnings: [] };
  const [x1, y1] = port.from;
  const [x2, y2] = port.to;
  if ([x1, y1, x2, y2].some((value) => Number.isNaN(value))) return none;
  const behind = BEHIND[port.inward];
  const skew = behind.x !== 0 ? x1 !== x2 || y1 === y2 : y1 !== y2 || x1 === x2;
  if (skew)
    return {
      ...none,
      problems: [
        {
          path,
          sentence: `The line from (${String(x1)}, ${String(y1)}) to (${String(x2)}, ${String(y2)}) mm does not run across a guide along ${port.inward}; it must be ${behind.x !== 0 ? "vertical" : "horizontal"} and have a length.`,
        },
      ],
    };
  const length = Math.hypot(x2 - x1, y2 - y1);
  const cell = meshCellMm(scene);
  const frame: LineFrame = {
    port,
    path,
    length,
    along: [(x2 - x1) / length, (y2 - y1) / length],
    behind,
    box: guideBehind(scene, port),
    reach: cell / 2,
  };
  const problems = wallProblems(scene, frame);
  if (scene.edges[behind.edge] !== "absorbing")
    problems.push({
      path: `${path}.inward`,
      sentence: `Behind the port the ${behind.edge} edge is ${scene.edges[behind.edge]}; the guide must run on to an absorbing edge.`,
    });
  const medium = guideMedium(scene, frame);
  if (!medium || linesInside(scene, frame.box, frame.reach))
    problems.push({
      path,
      sentence:
        "Along the port and behind it the guide must be filled by one lossless, non-dispersive medium out to the edge; move the port or what stands there.",
    });
  if (length < CELLS_A_HALF_WAVE * port.mode * cell * (1 - 1e-9))
    problems.push({
      path: `${path}.mode`,
      sentence: `Mode ${String(port.mode)} needs at least ${String(CELLS_A_HALF_WAVE * port.mode)} cells across the guide, which has ${String(Math.floor(length / cell))}; choose a lower mode or a finer mesh.`,
    });
  const cutoff = medium ? cutoffGHz(port, medium, length) : 0;
  const warnings =
    cutoff >= scene.band.toGHz
      ? [
          {
            path: `${path}.mode`,
            sentence: `Mode ${String(port.mode)} of the port "${port.id}" is below its cut-off of ${cutoff.toPrecision(4)} GHz over the whole band: nothing travels there and its S is undefined; raise the band or choose a lower mode.`,
          },
        ]
      : [];
  return { problems, warnings };
};

/** Two ports through which the same wave goes: one in the guide behind another, or both at one place. */
const overlaps = (scene: ResolvedScene): Problem[] =>
  scene.ports.flatMap((port, index) =>
    scene.ports.flatMap((other, otherIndex): Problem[] => {
      if (index === otherIndex) return [];
      const same =
        otherIndex < index &&
        port.mode === other.mode &&
        [...port.from, ...port.to].every((value, n) => value === [...other.from, ...other.to][n]);
      const path = `ports[${String(index)}]`;
      if (same)
        return [
          {
            path,
            sentence: `The ports "${other.id}" and "${port.id}" are the same line and mode; remove one or change its mode.`,
          },
        ];
      const tolerance = 1e-9 * Math.max(scene.section.widthMm, scene.section.heightMm);
      return enters(other.from, other.to, guideBehind(scene, port), tolerance)
        ? [
            {
              path,
              sentence: `The port "${other.id}" lies in the guide behind the port "${port.id}", which must run on unchanged to its edge; turn one of them or move them apart.`,
            },
          ]
        : [];
    }),
  );

/** Refusals and warnings about ports. Lengths that are NaN are passed over. */
export const checkPorts = (scene: ResolvedScene): Findings => {
  const each = scene.ports.map((port, index) => portFindings(scene, port, `ports[${String(index)}]`));
  return {
    problems: [...each.flatMap(({ problems }) => problems), ...overlaps(scene)],
    warnings: each.flatMap(({ warnings }) => warnings),
  };
};
