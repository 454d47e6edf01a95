/** Ports and plane waves: what can be said about them from the drawing alone, before any mesh. */
import type { Findings } from "./check-mesh.js";
import { checkPorts, isPlain } from "./check-ports.js";
import { distanceToLineMm, mediumAt } from "./contains.js";
import type { Problem, ResolvedScene } from "./schema.js";

/** Boundaries are looked at in this many places. */
const LOOKS = 64;

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
export const checkDrives = (scene: ResolvedScene): Findings => {
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
  const ports = checkPorts(scene);
  const waves = scene.sources.flatMap((source, index) =>
    source.kind === "plane-wave" ? planeWaveProblems(scene, source.insetMm, `sources[${String(index)}]`) : [],
  );
  return { problems: [...both, ...ports.problems, ...waves], warnings: ports.warnings };
};
