/**
 * What the engines compute. A scene that needs anything else is refused by name, never computed as if it were not
 * there. Three things are accepted with a sentence in the warnings instead, because they change no field: limits
 * that cannot be judged yet, corrections for the third dimension and for wall loss, and the way metal is cut.
 */
import type { Problem, Scene } from "./schema.js";
import type { Limit } from "./schema-drives.js";

/** Features without which a scene would be computed wrongly. */
export const FEATURES = [
  "ports",
  "plane-wave",
  "electric-poles",
  "magnetic-poles",
  "film",
  "line-probe",
  "area-probe",
] as const;
export type Feature = (typeof FEATURES)[number];

/** Judgements and corrections that a result can do without, if it says so. */
export const REFINEMENTS = [
  "conformal-metal",
  "limit-level",
  "limit-s",
  "limit-shielding",
  "limit-q",
  "limit-cutoff",
  "limit-absorbed-share",
  "plate-loss",
  "guide-width-frequencies",
  "wall-loss",
] as const;
export type Refinement = (typeof REFINEMENTS)[number];

export type FeatureSet = ReadonlySet<Feature | Refinement>;

/** What the engines compute today. */
export const COMPUTED: FeatureSet = new Set<Feature | Refinement>([
  "conformal-metal",
  "plane-wave",
  "electric-poles",
  "magnetic-poles",
  "film",
  "line-probe",
  "area-probe",
  "limit-absorbed-share",
  "ports",
  "limit-level",
  "limit-s",
  "limit-q",
  "limit-shielding",
  "limit-cutoff",
  "plate-loss",
  "guide-width-frequencies",
]);

const FEATURE_NAMES: Readonly<Record<Feature, string>> = {
  ports: "Waveguide ports are",
  "plane-wave": "Plane waves are",
  "electric-poles": "Electric poles (Debye, Lorentz) are",
  "magnetic-poles": "Magnetic poles (Debye, Lorentz) are",
  film: "Resistive films are",
  "line-probe": "Line probes (power, voltage) are",
  "area-probe": "Area probes (absorbed power, energy) are",
};

interface Use {
  feature: Feature;
  path: string;
  instead: string;
}

const uses = (scene: Scene): Use[] => {
  const found: Use[] = [];
  scene.media.forEach((medium, index) => {
    if ("perfect" in medium) return;
    const constant = "give constant σ and σ* for the frequency that matters";
    if (medium.electricPoles.length > 0)
      found.push({
        feature: "electric-poles",
        path: `media[${String(index)}].electricPoles`,
        instead: constant,
      });
    if (medium.magneticPoles.length > 0)
      found.push({
        feature: "magnetic-poles",
        path: `media[${String(index)}].magneticPoles`,
        instead: constant,
      });
  });
  scene.paint.forEach((patch, index) => {
    if (patch.kind === "film")
      found.push({
        feature: "film",
        path: `paint[${String(index)}]`,
        instead: "paint a thin area whose σ times its thickness is the sheet conductance",
      });
  });
  scene.sources.forEach((source, index) => {
    if (source.kind === "plane-wave")
      found.push({
        feature: "plane-wave",
        path: `sources[${String(index)}]`,
        instead: "use a distant line source",
      });
  });
  if (scene.ports.length > 0)
    found.push({ feature: "ports", path: "ports", instead: "drive the scene by a line source" });
  scene.probes.forEach((probe, index) => {
    const instead = "use point probes";
    if (probe.kind === "line")
      found.push({ feature: "line-probe", path: `probes[${String(index)}]`, instead });
    if (probe.kind === "area")
      found.push({ feature: "area-probe", path: `probes[${String(index)}]`, instead });
  });
  return found;
};

/** What of a scene no engine computes yet, by name and place. */
export const uncomputedFeatures = (scene: Scene, computed: FeatureSet = COMPUTED): Problem[] =>
  uses(scene)
    .filter((use) => !computed.has(use.feature))
    .map((use) => ({
      path: use.path,
      sentence: `${FEATURE_NAMES[use.feature]} not computed yet; ${use.instead}.`,
    }));

const limitRefinement = ({ of }: Limit): { refinement: Refinement; what: string } => {
  if ("probe" in of) return { refinement: "limit-level", what: "limits on a probe's level" };
  if ("s" in of) return { refinement: "limit-s", what: "limits on scattering parameters" };
  if ("shielding" in of) return { refinement: "limit-shielding", what: "limits on shielding" };
  if ("q" in of) return { refinement: "limit-q", what: "limits on Q" };
  if ("cutoff" in of) return { refinement: "limit-cutoff", what: "limits on cut-off frequencies" };
  return { refinement: "limit-absorbed-share", what: "limits on the absorbed share" };
};

/** Of a run that was not compared with the one without the shield patches. */
export const shieldingUnjudged = ({ name, id }: Pick<Limit, "name" | "id">): string =>
  `The limit "${name}" (${id}) is on shielding: it is judged only where the run is compared with one without the shield (--shielding).`;

const outOfPlaneCautions = ({ outOfPlane, wallConductivity }: Scene, computed: FeatureSet): Problem[] => {
  const path = "outOfPlane";
  const cautions: Problem[] = [];
  switch (outOfPlane.kind) {
    case "unbounded":
      return [];
    case "height":
      cautions.push({
        path,
        sentence: `The section is taken as lying between plates ${String(outOfPlane.mm)} mm apart with nothing varying along z; modes that vary along z exist besides.`,
      });
      if (!computed.has("plate-loss"))
        cautions.push({
          path,
          sentence: "The loss of the plates above and below is not yet added to any Q.",
        });
      else if (wallConductivity === undefined)
        cautions.push({
          path,
          sentence: "The plates above and below are taken as lossless: no wall conductivity is given.",
        });
      return cautions;
    case "guide-width":
      cautions.push({
        path,
        sentence: `An E-plane part of a guide ${String(outOfPlane.mm)} mm wide: the figures hold only where metal and fill are uniform across the width; band and limits are in the section's own frequencies f, the guide's are √(f² + f_c²).`,
      });
      if (!computed.has("guide-width-frequencies"))
        cautions.push({
          path,
          sentence: "The guide's frequencies, √(f² + f_c²), are not computed yet.",
        });
      return cautions;
    case "along-guide":
      return [
        {
          path,
          sentence:
            "A cross-section of a guide along z: its resonances are the guide's cut-off frequencies, not those of a box.",
        },
      ];
  }
};

/** What is left out of the result or must be borne in mind, in sentences for `quality.warnings`. */
export const refinementWarnings = (scene: Scene, computed: FeatureSet = COMPUTED): Problem[] => {
  const metal: Problem[] =
    scene.mesh.metal === "conformal" && !computed.has("conformal-metal") && drawsMetal(scene)
      ? [
          {
            path: "mesh.metal",
            sentence:
              "Metal is cut on the mesh lines, not yet along its drawn edge: curved and slanted metal is off by up to half a cell.",
          },
        ]
      : [];
  const wall: Problem[] =
    scene.wallConductivity !== undefined && !computed.has("wall-loss")
      ? [
          {
            path: "wallConductivity",
            sentence:
              "The loss of the section's own metal walls is in no S, spectrum or Q of a run; `modes` gives the Q of walls.",
          },
        ]
      : [];
  const limits = scene.limits.flatMap((limit, index): Problem[] => {
    const { refinement, what } = limitRefinement(limit);
    const path = `limits[${String(index)}]`;
    if (!computed.has(refinement))
      return [
        {
          path,
          sentence: `The limit "${limit.name}" (${limit.id}) is not judged: ${what} are not computed yet.`,
        },
      ];
    if ("shielding" in limit.of) return [{ path, sentence: shieldingUnjudged(limit) }];
    if ("cutoff" in limit.of)
      return [
        {
          path,
          sentence: `The limit "${limit.name}" (${limit.id}) is on a cut-off frequency: \`modes\` judges it, a run does not.`,
        },
      ];
    return [];
  });
  return [...metal, ...outOfPlaneCautions(scene, computed), ...wall, ...limits];
};

const drawsMetal = (scene: Scene): boolean => {
  const perfect = new Set([
    "pec",
    ...scene.media.filter((medium) => "perfect" in medium).map(({ id }) => id),
  ]);
  return (
    perfect.has(scene.background) ||
    scene.paint.some((patch) => patch.kind === "wall" || ("medium" in patch && perfect.has(patch.medium)))
  );
};

/** A run needs something that drives it; a document may still do without. */
export const missingDrive = (scene: Scene): Problem[] =>
  scene.sources.length === 0 && !scene.ports.some((port) => port.drive)
    ? [
        {
          path: "sources",
          sentence:
            scene.ports.length > 0
              ? 'Nothing drives this scene; set "drive" on at least one port.'
              : "Nothing drives this scene; place a source.",
        },
      ]
    : [];

/** Everything for which a sound document is still refused a run; empty where it can be computed. */
export const runProblems = (scene: Scene, computed: FeatureSet = COMPUTED): Problem[] => [
  ...uncomputedFeatures(scene, computed),
  ...missingDrive(scene),
];
