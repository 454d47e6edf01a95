/** The door by which every scene document comes in: text or JSON value in, a filled-in scene or all problems out. */
import { utf8ToBytes } from "@noble/hashes/utils.js";
import { checkDrives } from "./check-drives.js";
import { checkMesh } from "./check-mesh.js";
import type { KnownElsewhere } from "./check-names.js";
import { checkNames } from "./check-names.js";
import { checkPlaces } from "./check-places.js";
import type { FeatureSet } from "./features.js";
import { COMPUTED, refinementWarnings, runProblems } from "./features.js";
import { MAXIMA } from "./limits.js";
import type { Migration } from "./migrations.js";
import { migrateDocument } from "./migrations.js";
import { listed, problemsFromIssues } from "./problems.js";
import { repair } from "./repair.js";
import { evaluateScene } from "./resolve.js";
import type { Problem, Scene } from "./schema.js";
import { sceneDocumentSchema } from "./schema.js";

export interface ReadOptions {
  /**
   * `document` (the default): a drawing that is being made or kept. `run` also refuses what no engine computes
   * and a scene that nothing drives, and warns of what the result will leave out.
   */
  purpose?: "run" | "document";
  /** What the engines compute; given by tests. */
  features?: FeatureSet;
  migrations?: readonly Migration[];
}

/** Paths are written as in `paint[3].points[0][1]`; the empty path is the document as a whole. */
export type ReadOutcome =
  | { ok: true; scene: Scene; warnings: Problem[] }
  | { ok: false; problems: Problem[] };

const NOTHING_ELSEWHERE: KnownElsewhere = { media: new Set(), probes: new Set(), ports: new Set() };
const STOP_PERIODS = 1_000;

const refused = (path: string, sentence: string): ReadOutcome => ({
  ok: false,
  problems: [{ path, sentence }],
});

const tooLarge = (text: string): boolean =>
  // UTF-8 has one to three bytes per UTF-16 unit: only the middle needs counting.
  text.length > MAXIMA.jsonBytes ||
  (text.length * 3 > MAXIMA.jsonBytes && utf8ToBytes(text).length > MAXIMA.jsonBytes);

/** What is no JSON value at all (undefined, a function) has no text; the schema then says that it is no object. */
const asText = (value: unknown): string => {
  const text: unknown = JSON.stringify(value);
  return typeof text === "string" ? text : "";
};

const parse = (input: unknown): { ok: true; value: unknown } | { ok: false; outcome: ReadOutcome } => {
  const maximum = `${String(MAXIMA.jsonBytes / 1024 / 1024)} MB`;
  const large = refused("", `The document is larger than ${maximum}; simplify brush strokes and outlines.`);
  try {
    if (typeof input !== "string")
      return tooLarge(asText(input)) ? { ok: false, outcome: large } : { ok: true, value: input };
    if (tooLarge(input)) return { ok: false, outcome: large };
    return { ok: true, value: JSON.parse(input) as unknown };
  } catch (error) {
    const reason = error instanceof Error ? error.message : "it cannot be read";
    return { ok: false, outcome: refused("", `The document is not JSON: ${reason}.`) };
  }
};

/** Fills in the stop time, which depends on the band: 1,000 periods of its upper edge. */
const fillIn = (parsed: ReturnType<typeof sceneDocumentSchema.parse>): Scene => ({
  ...parsed,
  stop: { ...parsed.stop, maxTimeNs: parsed.stop.maxTimeNs ?? STOP_PERIODS / parsed.band.toGHz },
});

interface Context {
  known: KnownElsewhere;
  parameterNames: ReadonlySet<string>;
  /** Top-level keys that hold a stand-in, so that nothing may be said that depends on them. */
  replaced: ReadonlySet<string>;
}

/** Everything that the schema cannot say, save what depends on a value that was itself refused. */
const checkMeaning = (scene: Scene, context: Context): { problems: Problem[]; warnings: Problem[] } => {
  const { scene: resolved, problems } = evaluateScene(scene, context.parameterNames);
  const sound = (...keys: string[]): boolean => !keys.some((key) => context.replaced.has(key));
  const names = checkNames(scene, context.known).filter(
    ({ path }) => sound("media") || !/(^background|\.medium)$/.test(path),
  );
  const found = [...names, ...problems];
  const places = checkPlaces(resolved).filter(
    ({ sentence, path }) =>
      (sound("section") || !(path.startsWith("section") || sentence.includes("outside the section"))) &&
      (sound("polarization") || !/\.(field|quantity|mode)$/.test(path)),
  );
  const mesh =
    sound("section", "band", "mesh", "stop") && !problems.some(({ path }) => path.startsWith("section"))
      ? checkMesh(resolved)
      : { problems: [], warnings: [] };
  const drives = sound("section", "edges", "band", "mesh")
    ? checkDrives(resolved)
    : { problems: [], warnings: [] };
  return {
    problems: [...found, ...places, ...mesh.problems, ...drives.problems],
    warnings: [...mesh.warnings, ...drives.warnings],
  };
};

/**
 * Reads a scene document: its JSON text, or the value it parses to. Older versions are migrated, defaults filled
 * in. Every problem is reported at once, in the document's order where it can be; warnings do not stop a run.
 */
export const readScene = (input: unknown, options: ReadOptions = {}): ReadOutcome => {
  const text = parse(input);
  if (!text.ok) return text.outcome;
  const migrated = migrateDocument(text.value, options.migrations);
  if (!migrated.ok) return migrated;
  const { document } = migrated;
  const parsed = sceneDocumentSchema.safeParse(document);
  if (!parsed.success) {
    const problems = problemsFromIssues(parsed.error.issues, document);
    const rest = repair(document, parsed.error.issues);
    const again = rest === null ? null : sceneDocumentSchema.safeParse(rest.document);
    if (rest !== null && again?.success === true)
      problems.push(...checkMeaning(fillIn(again.data), rest).problems.map(rest.restorePath));
    return { ok: false, problems: listed(problems) };
  }
  const scene = fillIn(parsed.data);
  const { problems, warnings } = checkMeaning(scene, {
    known: NOTHING_ELSEWHERE,
    parameterNames: new Set(),
    replaced: new Set(),
  });
  const forRun = options.purpose === "run";
  const features = options.features ?? COMPUTED;
  if (forRun) problems.push(...runProblems(scene, features));
  if (problems.length > 0) return { ok: false, problems: listed(problems) };
  return { ok: true, scene, warnings: [...warnings, ...(forRun ? refinementWarnings(scene, features) : [])] };
};
