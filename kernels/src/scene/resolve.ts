/** Parameters and expressions evaluated, defaults that depend on other values filled in. */
import { evaluateExpression, FUNCTION_NAMES } from "./expressions.js";
import { meshCellMm } from "./grid.js";
import { MAXIMA } from "./limits.js";
import { formatPath } from "./problems.js";
import type { Problem, Resolved, ResolvedScene, ResolvedSource, Scene } from "./schema.js";
import type { Waveform } from "./schema-drives.js";
import { BUILT_IN_MEDIA } from "./schema-media.js";
import type { Medium } from "./schema-media.js";
import type { Length } from "./schema-values.js";

/** Plane waves whose inset is left out start this many cells inside the section. */
export const DEFAULT_INSET_CELLS = 4;

/**
 * The pulse that stays within 20 dB of its peak over the whole band. Its spectrum is g(f − f₀) − g(f + f₀), g a Gaussian 20 dB down at
 * half the width, which is zero at 0 Hz: in a band that begins near there the pulse is made wider downward until the lower
 * end is high enough, or as near to it as such a pulse can come.
 */
export const defaultWaveform = ({ fromGHz, toGHz }: Scene["band"]): Waveform => {
  const lowerEndIsHighEnough = (half: number): boolean => {
    const center = toGHz - half;
    const level = (f: number): number =>
      10 ** -(((f - center) / half) ** 2) - 10 ** -(((f + center) / half) ** 2);
    // The second term moves the peak upward by little: a few places above the middle find it.
    const peak = Math.max(...[0, 0.1, 0.2, 0.3].map((share) => level(center + share * half)));
    return level(fromGHz) >= 0.0999 * peak;
  };
  const bandwidth = toGHz - fromGHz;
  let half = bandwidth / 2;
  if (!lowerEndIsHighEnough(half)) {
    let [narrow, wide] = [half, 0.75 * toGHz];
    for (let n = 0; n < 20; n += 1) {
      const middle = (narrow + wide) / 2;
      if (lowerEndIsHighEnough(middle)) wide = middle;
      else narrow = middle;
    }
    half = Number(wide.toPrecision(5));
  }
  return { kind: "pulse", centerGHz: toGHz - half, widthGHz: 2 * half };
};

const LENGTH_KEYS: ReadonlySet<string> = new Set([
  "widthMm",
  "heightMm",
  "x",
  "y",
  "width",
  "height",
  "rx",
  "ry",
  "points",
  "holes",
  "from",
  "to",
  "insetMm",
  "shiftMm",
]);

/** Evaluates lengths and collects what is wrong; an unusable length becomes NaN so that checks can go on. */
class LengthEvaluator {
  readonly problems: Problem[] = [];
  readonly #values: ReadonlyMap<string, number>;
  readonly #unusable: ReadonlySet<string>;

  constructor(values: ReadonlyMap<string, number>, unusable: ReadonlySet<string>) {
    this.#values = values;
    this.#unusable = unusable;
  }

  length(value: Length, path: readonly PropertyKey[]): number {
    if (typeof value === "number") return value;
    // A name whose own definition is refused would only repeat that problem here.
    if ([...value.matchAll(/[a-z][a-zA-Z0-9]*/gi)].some(([name]) => this.#unusable.has(name)))
      return Number.NaN;
    const result = evaluateExpression(value, this.#values);
    if (!result.ok) {
      this.problems.push({ path: formatPath(path), sentence: result.sentence });
      return Number.NaN;
    }
    if (Math.abs(result.value) > MAXIMA.lengthMm) {
      this.problems.push({
        path: formatPath(path),
        sentence: `"${value}" gives ${String(result.value)} mm; lengths go up to ${String(MAXIMA.lengthMm)} mm.`,
      });
      return Number.NaN;
    }
    return result.value;
  }

  /** A copy of `value` with every length in it evaluated; `within` says that all entries below are lengths. */
  copy(value: unknown, path: readonly PropertyKey[], within: boolean): unknown {
    if (within && (typeof value === "number" || typeof value === "string")) return this.length(value, path);
    if (Array.isArray(value))
      return value.map((entry: unknown, index) => this.copy(entry, [...path, index], within));
    if (typeof value !== "object" || value === null) return value;
    return Object.fromEntries(
      Object.entries(value).map(([key, entry]) => [
        key,
        key === "waveform" ? entry : this.copy(entry, [...path, key], LENGTH_KEYS.has(key)),
      ]),
    );
  }
}

interface ParameterValues {
  values: Map<string, number>;
  /** Names that exist but have no value. */
  unusable: Set<string>;
  problems: Problem[];
}

const evaluateParameters = (parameters: Scene["parameters"], unusable: Set<string>): ParameterValues => {
  const values = new Map<string, number>();
  const problems: Problem[] = [];
  const later = new Set(parameters.map((parameter) => parameter.name));
  parameters.forEach((parameter, index) => {
    const path = ["parameters", index, "value"];
    if (FUNCTION_NAMES.includes(parameter.name))
      problems.push({
        path: formatPath(["parameters", index, "name"]),
        sentence: `"${parameter.name}" is the name of a function; choose another name.`,
      });
    const evaluator = new LengthEvaluator(values, unusable);
    const own =
      typeof parameter.value === "string" ? [...parameter.value.matchAll(/[a-z][a-zA-Z0-9]*/gi)] : [];
    const tooEarly = own.find(([name]) => later.has(name) && !values.has(name) && !unusable.has(name))?.[0];
    let value = Number.NaN;
    if (tooEarly === undefined) {
      value = evaluator.length(parameter.value, path);
      problems.push(...evaluator.problems);
    } else
      problems.push({
        path: formatPath(path),
        sentence:
          tooEarly === parameter.name
            ? `"${tooEarly}" is defined by itself; give it a number or earlier parameters.`
            : `"${tooEarly}" is defined later; a parameter may use earlier ones only, so move it up.`,
      });
    if (Number.isNaN(value)) unusable.add(parameter.name);
    else if (!values.has(parameter.name)) values.set(parameter.name, value);
  });
  return { values, unusable, problems };
};

export interface Evaluated {
  /** Lengths that could not be evaluated are NaN. */
  scene: ResolvedScene;
  problems: Problem[];
}

/**
 * Evaluates every length of a scene and says what cannot be evaluated. `knownNames` are parameters that exist in
 * the document but were left out of `scene` because they are refused for another reason.
 */
export const evaluateScene = (scene: Scene, knownNames: Iterable<string> = []): Evaluated => {
  const { parameters: written, ...rest } = scene;
  const parameters = evaluateParameters(written, new Set(knownNames));
  const evaluator = new LengthEvaluator(parameters.values, parameters.unusable);
  const resolve = <K extends "section" | "paint" | "ports" | "probes">(key: K): ResolvedScene[K] =>
    evaluator.copy(scene[key], [key], false) as ResolvedScene[K];
  const section = resolve("section");
  const mediaById = new Map<string, Medium>(
    [...BUILT_IN_MEDIA, ...scene.media].map((medium) => [medium.id, medium]),
  );
  const sources = evaluator.copy(scene.sources, ["sources"], false) as Resolved<Scene["sources"]>;
  const paint = resolve("paint");
  const insetMm = DEFAULT_INSET_CELLS * meshCellMm({ ...rest, paint, mediaById });
  const filledIn = sources.map((source): ResolvedSource => {
    const waveform = source.waveform ?? defaultWaveform(scene.band);
    return source.kind === "plane-wave"
      ? { ...source, waveform, insetMm: source.insetMm ?? insetMm }
      : { ...source, waveform };
  });
  const resolved: ResolvedScene = {
    ...rest,
    section,
    paint,
    sources: filledIn,
    ports: resolve("ports"),
    probes: resolve("probes"),
    parameterValues: parameters.values,
    mediaById,
  };
  return { scene: resolved, problems: [...parameters.problems, ...evaluator.problems] };
};

/** Why a scene that was never read by `readScene` cannot be resolved. */
export class SceneError extends Error {
  override name = "SceneError";
  constructor(readonly problems: readonly Problem[]) {
    super(problems.map((problem) => `${problem.path}: ${problem.sentence}`).join("\n"));
  }
}

/** A scene with all lengths in mm. Throws a SceneError where an expression has no value. */
export const resolveScene = (scene: Scene): ResolvedScene => {
  const { scene: resolved, problems } = evaluateScene(scene);
  if (problems.length > 0) throw new SceneError(problems);
  return resolved;
};
