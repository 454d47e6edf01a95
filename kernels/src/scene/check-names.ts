/** Ids and references: unique in their list, and pointing at something that exists. */
import { canonicalJson } from "./hash.js";
import type { Problem, Scene } from "./schema.js";
import { BUILT_IN_MEDIA } from "./schema-media.js";

/** Ids that stand in the document but in an entry that is refused for another reason: references to them hold. */
export interface KnownElsewhere {
  media: ReadonlySet<string>;
  probes: ReadonlySet<string>;
  ports: ReadonlySet<string>;
}

const duplicates = (list: string, key: "id" | "name", values: readonly string[]): Problem[] => {
  const firstAt = new Map<string, number>();
  return values.flatMap((value, index) => {
    const first = firstAt.get(value);
    if (first === undefined) {
      firstAt.set(value, index);
      return [];
    }
    return [
      {
        path: `${list}[${String(index)}].${key}`,
        sentence: `"${value}" is already the ${key} of ${list}[${String(first)}]; each must be different.`,
      },
    ];
  });
};

const builtInChanged = (scene: Scene): Problem[] =>
  scene.media.flatMap((medium, index) => {
    const builtIn = BUILT_IN_MEDIA.find((candidate) => candidate.id === medium.id);
    if (builtIn === undefined) return [];
    // Listing `air` as air is harmless; listing something else under that name would mislead every reader.
    if (canonicalJson({ ...medium, name: "" }) === canonicalJson({ ...builtIn, name: "" })) return [];
    return [
      {
        path: `media[${String(index)}].id`,
        sentence: `"${medium.id}" is built in and means ${builtIn.name.toLowerCase()}; give this medium another id.`,
      },
    ];
  });

const limitReferences = (scene: Scene, known: KnownElsewhere): Problem[] => {
  const probes = new Map(scene.probes.map((probe) => [probe.id, probe]));
  const ports = new Set([...scene.ports.map((port) => port.id), ...known.ports]);
  const missingProbe = (id: string, path: string): Problem[] =>
    probes.has(id) || known.probes.has(id)
      ? []
      : [{ path, sentence: `There is no probe "${id}"; add it or name another one.` }];
  return scene.limits.flatMap((limit, index): Problem[] => {
    const path = `limits[${String(index)}].of`;
    const of = limit.of;
    if ("probe" in of) return missingProbe(of.probe, `${path}.probe`);
    if ("shielding" in of) return missingProbe(of.shielding, `${path}.shielding`);
    if ("s" in of)
      return of.s.flatMap((id, side) =>
        ports.has(id)
          ? []
          : [
              {
                path: `${path}.s[${String(side)}]`,
                sentence: `There is no port "${id}"; add it or name another one.`,
              },
            ],
      );
    if (!("absorbedShare" in of)) return [];
    const missing = missingProbe(of.absorbedShare, `${path}.absorbedShare`);
    if (missing.length > 0) return missing;
    const probe = probes.get(of.absorbedShare);
    return probe === undefined || (probe.kind === "area" && probe.quantity === "absorbed")
      ? []
      : [
          {
            path: `${path}.absorbedShare`,
            sentence: `"${probe.id}" does not measure absorbed power; name an area probe with "quantity": "absorbed".`,
          },
        ];
  });
};

/** Unique ids, built-in names, and every reference to a medium, probe or port. */
export const checkNames = (scene: Scene, known: KnownElsewhere): Problem[] => {
  const media = new Set([
    ...BUILT_IN_MEDIA.map((medium) => medium.id),
    ...scene.media.map((medium) => medium.id),
    ...known.media,
  ]);
  const medium = (id: string, path: string): Problem[] =>
    media.has(id)
      ? []
      : [{ path, sentence: `There is no medium "${id}"; add it to "media" or choose one that is there.` }];
  const lists = ["media", "paint", "sources", "ports", "probes", "limits"] as const;
  return [
    ...lists.flatMap((list) =>
      duplicates(
        list,
        "id",
        scene[list].map((entry) => entry.id),
      ),
    ),
    ...duplicates(
      "parameters",
      "name",
      scene.parameters.map((parameter) => parameter.name),
    ),
    ...builtInChanged(scene),
    ...medium(scene.background, "background"),
    ...scene.paint.flatMap((patch, index) =>
      "medium" in patch ? medium(patch.medium, `paint[${String(index)}].medium`) : [],
    ),
    ...limitReferences(scene, known),
  ];
};
