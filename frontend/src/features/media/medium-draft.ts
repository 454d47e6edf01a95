/** A medium as it stands in the form: every figure as typed, judged as a whole by the scene schema. */
import type { Medium, Pole } from "@heddle/kernels/scene";
import { isPerfect, mediumSchema } from "@heddle/kernels/scene";
import { readNumber } from "../../lib/figures";

export type DraftKind = "fill" | "electric" | "magnetic";

export interface PoleDraft {
  /** Only to tell rows apart. */
  key: number;
  of: "electric" | "magnetic";
  kind: Pole["kind"];
  delta: string;
  tauNs: string;
  resonanceGHz: string;
  dampingGHz: string;
}

export interface MediumDraft {
  name: string;
  kind: DraftKind;
  relativePermittivity: string;
  relativePermeability: string;
  conductivity: string;
  magneticLoss: string;
  poles: PoleDraft[];
  source: string;
}

export type Faults = Partial<Record<string, string>>;

export const emptyPole = (key: number): PoleDraft => ({
  key,
  of: "electric",
  kind: "debye",
  delta: "",
  tauNs: "",
  resonanceGHz: "",
  dampingGHz: "",
});

const poleDraft = (of: PoleDraft["of"], pole: Pole, key: number): PoleDraft => {
  const draft = { ...emptyPole(key), of, kind: pole.kind, delta: String(pole.delta) };
  if (pole.kind === "debye") return { ...draft, tauNs: String(pole.tauNs) };
  return { ...draft, resonanceGHz: String(pole.resonanceGHz), dampingGHz: String(pole.dampingGHz) };
};

const BLANK: MediumDraft = {
  name: "",
  kind: "fill",
  relativePermittivity: "1",
  relativePermeability: "1",
  conductivity: "0",
  magneticLoss: "0",
  poles: [],
  source: "",
};

/** What the form starts with: a medium of the library, or air under no name. */
export function draftOf(entry: { medium: Medium; source: string } | null): MediumDraft {
  if (entry === null) return BLANK;
  const { medium, source } = entry;
  if (isPerfect(medium)) return { ...BLANK, name: medium.name, kind: medium.perfect, source };
  const poles = [
    ...medium.electricPoles.map((pole) => ["electric", pole] as const),
    ...medium.magneticPoles.map((pole) => ["magnetic", pole] as const),
  ];
  return {
    name: medium.name,
    kind: "fill",
    relativePermittivity: String(medium.relativePermittivity),
    relativePermeability: String(medium.relativePermeability),
    conductivity: String(medium.conductivity),
    magneticLoss: String(medium.magneticLoss),
    poles: poles.map(([of, pole], key) => poleDraft(of, pole, key)),
    source,
  };
}

/** "Carbon foam, 10 mm" gives "carbon-foam-10-mm"; a number is added where the id is taken. */
export function mediumId(name: string, taken: ReadonlySet<string>): string {
  const plain = name
    .normalize("NFKD")
    .replaceAll(/\p{M}/gu, "")
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, "-")
    .replaceAll(/^-+|-+$/g, "");
  const base = plain === "" ? "medium" : plain;
  for (let count = 1; ; count++) {
    const id = count === 1 ? base.slice(0, 40) : `${base.slice(0, 36)}-${count}`;
    if (!taken.has(id)) return id;
  }
}

const SENTENCES: Record<string, string> = {
  name: "Give it a name of at most 200 characters.",
  relativePermittivity: "A number from 1 to 10⁶.",
  relativePermeability: "A number from 1 to 10⁶.",
  conductivity: "A number from 0 to 10¹² S/m.",
  magneticLoss: "A number from 0 to 10¹⁵ Ω/m.",
  delta: "A number from 0 to 10⁶.",
  tauNs: "A number of ns above 0.",
  resonanceGHz: "A number of GHz above 0.",
  dampingGHz: "A number of GHz, 0 or more.",
};

const numberOf = (text: string): number => readNumber(text) ?? Number.NaN;

const poleOf = (draft: PoleDraft): unknown =>
  draft.kind === "debye"
    ? { kind: "debye", delta: numberOf(draft.delta), tauNs: numberOf(draft.tauNs) }
    : {
        kind: "lorentz",
        delta: numberOf(draft.delta),
        resonanceGHz: numberOf(draft.resonanceGHz),
        dampingGHz: numberOf(draft.dampingGHz),
      };

/**
 * Judges a draft by the scene schema.
 * @returns the medium, or a sentence per faulty field (poles as `poles.<key>.<field>`); `source` is judged too
 */
export function mediumOf(draft: MediumDraft, id: string): { medium: Medium | null; faults: Faults } {
  const faults: Faults = {};
  const name = draft.name.trim();
  if (name === "") faults["name"] = SENTENCES["name"];
  if (draft.source.trim() === "")
    faults["source"] = "Say where the figures come from: a data sheet, a handbook, a measurement.";
  const electric = draft.poles.filter((pole) => pole.of === "electric");
  const magnetic = draft.poles.filter((pole) => pole.of === "magnetic");
  const judged = mediumSchema.safeParse(
    draft.kind === "fill"
      ? {
          id,
          name,
          relativePermittivity: numberOf(draft.relativePermittivity),
          relativePermeability: numberOf(draft.relativePermeability),
          conductivity: numberOf(draft.conductivity),
          magneticLoss: numberOf(draft.magneticLoss),
          electricPoles: electric.map(poleOf),
          magneticPoles: magnetic.map(poleOf),
        }
      : { id, name, perfect: draft.kind },
  );
  if (judged.success) return { medium: judged.data, faults };
  for (const path of fillPaths(judged.error.issues)) {
    const [field, index, inner] = path;
    if ((field === "electricPoles" || field === "magneticPoles") && typeof index === "number") {
      const pole = (field === "electricPoles" ? electric : magnetic).at(index);
      if (pole !== undefined) faults[`poles.${pole.key}.${String(inner)}`] = SENTENCES[String(inner)];
    } else if (typeof field === "string") {
      faults[field] ??= SENTENCES[field] ?? "This is not valid.";
    }
  }
  return { medium: null, faults };
}

interface Issue {
  code?: string | undefined;
  path: PropertyKey[];
  errors?: Issue[][];
}

/** The medium schema is a choice between perfect and filling media: the places that are wrong for the nearer choice. */
function fillPaths(issues: readonly Issue[]): PropertyKey[][] {
  return issues.flatMap((issue) => {
    if (issue.errors === undefined) return [issue.path];
    const branches = issue.errors.filter(
      (branch) => !branch.some((inner) => inner.code === "unrecognized_keys"),
    );
    return fillPaths(branches.at(0) ?? issue.errors.at(0) ?? []).map((path) => [...issue.path, ...path]);
  });
}
