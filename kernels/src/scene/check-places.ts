/** Shapes with an extent, things inside the section, components that the polarization has. */
import { MAXIMA } from "./limits.js";
import type { Problem, ResolvedPatch, ResolvedProbe, ResolvedScene } from "./schema.js";

/** Rounding of an expression must not push a probe off the section's edge. */
const SLACK_MM = 1e-9;

const positive = (value: number, path: string): Problem[] =>
  value <= 0 ? [{ path, sentence: `It is ${String(value)} mm; it must be greater than 0.` }] : [];

const extents = (patch: ResolvedPatch, path: string): Problem[] => {
  switch (patch.kind) {
    case "rectangle":
      return [...positive(patch.width, `${path}.width`), ...positive(patch.height, `${path}.height`)];
    case "ellipse":
      return [...positive(patch.rx, `${path}.rx`), ...positive(patch.ry, `${path}.ry`)];
    case "stroke":
      return positive(patch.widthMm, `${path}.widthMm`);
    case "wall":
    case "film": {
      const first = patch.points.at(0);
      const same = first !== undefined && patch.points.every(([x, y]) => x === first[0] && y === first[1]);
      return same
        ? [
            {
              path: `${path}.points`,
              sentence: "All its points are the same; a line needs two different points.",
            },
          ]
        : [];
    }
    case "polygon":
      return [];
  }
};

const pointCount = (patch: ResolvedPatch): number =>
  "points" in patch
    ? patch.points.length + ("holes" in patch ? patch.holes.reduce((sum, hole) => sum + hole.length, 0) : 0)
    : 0;

const paint = (scene: ResolvedScene): Problem[] => {
  const points = scene.paint.reduce((sum, patch) => sum + pointCount(patch), 0);
  const tooMany: Problem[] =
    points > MAXIMA.points
      ? [
          {
            path: "paint",
            sentence: `The patches have ${String(points)} points in all; the maximum is ${String(MAXIMA.points)}. Simplify brush strokes and outlines.`,
          },
        ]
      : [];
  return [...tooMany, ...scene.paint.flatMap((patch, index) => extents(patch, `paint[${String(index)}]`))];
};

type Inside = (x: number, y: number, path: string, what: string) => Problem[];

const insideOf = ({ section }: ResolvedScene): Inside => {
  const { widthMm, heightMm } = section;
  return (x, y, path, what) => {
    const outside = (value: number, size: number): boolean => value < -SLACK_MM || value > size + SLACK_MM;
    return outside(x, widthMm) || outside(y, heightMm)
      ? [
          {
            path,
            sentence: `The ${what} at (${String(x)}, ${String(y)}) mm lies outside the section of ${String(widthMm)} × ${String(heightMm)} mm; move it inside.`,
          },
        ]
      : [];
  };
};

const probePlace = (probe: ResolvedProbe, path: string, inside: Inside): Problem[] => {
  switch (probe.kind) {
    case "point":
      return inside(probe.x, probe.y, path, "probe");
    case "line":
      return [
        ...inside(...probe.from, `${path}.from`, "probe"),
        ...inside(...probe.to, `${path}.to`, "probe"),
        ...(probe.from[0] === probe.to[0] && probe.from[1] === probe.to[1]
          ? [{ path, sentence: "It starts and ends at the same point; a line probe needs a length." }]
          : []),
      ];
    case "area": {
      const extent = [...positive(probe.width, `${path}.width`), ...positive(probe.height, `${path}.height`)];
      if (extent.length > 0) return extent;
      const corner = inside(probe.x, probe.y, path, "probe");
      return corner.length > 0
        ? corner
        : inside(probe.x + probe.width, probe.y + probe.height, path, "probe's upper right corner");
    }
  }
};

const COMPONENTS = { TMz: ["Ez", "Hx", "Hy"], TEz: ["Hz", "Ex", "Ey"] } as const;

const polarization = (scene: ResolvedScene): Problem[] => {
  const has: readonly string[] = COMPONENTS[scene.polarization];
  const probes = scene.probes.flatMap((probe, index): Problem[] => {
    const path = `probes[${String(index)}]`;
    if (probe.kind === "point" && !has.includes(probe.field))
      return [
        {
          path: `${path}.field`,
          sentence: `${scene.polarization} has no ${probe.field}; choose ${has.join(", ")} or change the polarization.`,
        },
      ];
    if (probe.kind === "line" && probe.quantity === "voltage" && scene.polarization === "TMz")
      return [
        {
          path: `${path}.quantity`,
          sentence: "TMz has no electric field in the section, hence no voltage along a line; TEz has.",
        },
      ];
    return [];
  });
  const ports = scene.ports.flatMap((port, index): Problem[] =>
    scene.polarization === "TMz" && port.mode < 1
      ? [
          {
            path: `ports[${String(index)}].mode`,
            sentence: "In TMz a guide's modes start at 1; mode 0 (TEM) exists in TEz only.",
          },
        ]
      : [],
  );
  return [...probes, ...ports];
};

/** The section's size, patches' extents, places of sources, probes and ports, and components. */
export const checkPlaces = (scene: ResolvedScene): Problem[] => {
  const inside = insideOf(scene);
  return [
    ...positive(scene.section.widthMm, "section.widthMm"),
    ...positive(scene.section.heightMm, "section.heightMm"),
    ...paint(scene),
    ...scene.sources.flatMap((source, index) =>
      source.kind === "line" ? inside(source.x, source.y, `sources[${String(index)}]`, "source") : [],
    ),
    ...scene.ports.flatMap((port, index) => [
      ...inside(...port.from, `ports[${String(index)}].from`, "port"),
      ...inside(...port.to, `ports[${String(index)}].to`, "port"),
    ]),
    ...scene.probes.flatMap((probe, index) => probePlace(probe, `probes[${String(index)}]`, inside)),
    ...polarization(scene),
    ...scene.limits.flatMap((limit, index): Problem[] =>
      "points" in limit && limit.points.some(([f], at) => f < (limit.points[at - 1]?.[0] ?? 0))
        ? [
            {
              path: `limits[${String(index)}].points`,
              sentence: "The frequencies of a limit must not fall from one point to the next; sort them.",
            },
          ]
        : [],
    ),
  ];
};
