import {
  BUILT_IN_MEDIA,
  type Length,
  type Medium,
  type Resolved,
  type ResolvedPatch,
  type ResolvedPort,
  type ResolvedProbe,
  type Scene,
} from "@heddle/kernels/scene";
import { byId, type ItemOf, type ItemRef, makeRef, type PickableList, splitRef } from "./refs";
import { type ParameterValues, readLength, readParameters } from "./lengths";

export type DrawnSource = Resolved<Scene["sources"][number]>;

interface DrawnOf {
  paint: ResolvedPatch;
  sources: DrawnSource;
  ports: ResolvedPort;
  probes: ResolvedProbe;
}
export type DrawnItem = DrawnOf[PickableList];

/** A scene with its lengths in mm, ready to be drawn. What cannot be evaluated is left out and named. */
export interface Drawing {
  scene: Scene;
  widthMm: number;
  heightMm: number;
  paint: ResolvedPatch[];
  sources: DrawnSource[];
  ports: ResolvedPort[];
  probes: ResolvedProbe[];
  parameters: ParameterValues;
  mediaById: ReadonlyMap<string, Medium>;
  /** Items that have a length without a value, with the sentence that says why. */
  undrawable: { ref: ItemRef; sentence: string }[];
}

/** Keys that hold a length, or lists of lengths, in the items of a scene. */
const LENGTH_KEYS = new Set([
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
  "widthMm",
  "insetMm",
  "shiftMm",
]);

type Nested = Length | readonly Nested[];

const usesExpression = (value: Nested): boolean =>
  typeof value === "string" || (Array.isArray(value) && value.some(usesExpression));

class NoValue extends Error {}

function evaluate(value: Nested, values: ParameterValues): unknown {
  if (typeof value === "object") return value.map((entry) => evaluate(entry, values));
  const reading = readLength(value, values);
  if (!reading.ok) throw new NoValue(reading.sentence);
  return reading.value;
}

type Outcome<T> = { ok: true; item: T } | { ok: false; sentence: string };
interface Kept {
  /** null: the item uses no expression and holds for any parameters. */
  values: ParameterValues | null;
  outcome: Outcome<DrawnItem>;
}
const kept = new WeakMap<object, Kept>();

function resolveAnew(item: ItemOf[PickableList], values: ParameterValues): Kept {
  const entries = Object.entries(item) as [string, unknown][];
  const lengths = entries.filter(([key]) => LENGTH_KEYS.has(key)) as [string, Nested][];
  if (!lengths.some(([, value]) => usesExpression(value)))
    // Every length is a number already, so the item as written is the resolved one.
    return { values: null, outcome: { ok: true, item: item as DrawnItem } };
  try {
    const evaluated = Object.fromEntries(lengths.map(([key, value]) => [key, evaluate(value, values)]));
    return { values, outcome: { ok: true, item: { ...item, ...evaluated } as DrawnItem } };
  } catch (error) {
    if (!(error instanceof NoValue)) throw error;
    return { values, outcome: { ok: false, sentence: error.message } };
  }
}

/** One item with its lengths in mm. An unchanged item gives the same object again, which caches rely on. */
export function resolveItem<List extends PickableList>(
  item: ItemOf[List],
  values: ParameterValues,
): Outcome<DrawnOf[List]> {
  let entry = kept.get(item);
  if (entry === undefined || (entry.values !== null && entry.values !== values)) {
    entry = resolveAnew(item, values);
    kept.set(item, entry);
  }
  // The list of the item going in is the list of the item coming out.
  return entry.outcome as Outcome<DrawnOf[List]>;
}

const FALLBACK_MM = 100;

/** `previous` lends its evaluated parameters where they have not changed, so that unchanged items stay the same objects. */
export function drawingOf(scene: Scene, previous?: Drawing): Drawing {
  const parameters =
    previous !== undefined && previous.scene.parameters === scene.parameters
      ? previous.parameters
      : readParameters(scene.parameters);
  const undrawable: Drawing["undrawable"] = [];
  // A list that has not changed stays the same array, so that its layer need not be drawn again.
  const resolveList = <List extends PickableList>(
    list: List,
    items: readonly ItemOf[List][],
    before: DrawnOf[List][] | undefined,
  ): DrawnOf[List][] => {
    const unchanged = previous?.scene[list] === scene[list] && previous.parameters === parameters;
    if (unchanged && before !== undefined) {
      undrawable.push(...previous.undrawable.filter(({ ref }) => splitRef(ref).list === list));
      return before;
    }
    return items.flatMap((item) => {
      const outcome = resolveItem<List>(item, parameters);
      if (outcome.ok) return [outcome.item];
      undrawable.push({ ref: makeRef(list, item.id), sentence: outcome.sentence });
      return [];
    });
  };
  const side = (length: Length): number => {
    const reading = readLength(length, parameters);
    return reading.ok && reading.value > 0 ? reading.value : FALLBACK_MM;
  };
  const mediaById =
    previous !== undefined && previous.scene.media === scene.media
      ? previous.mediaById
      : new Map([...BUILT_IN_MEDIA, ...scene.media].map((medium) => [medium.id, medium]));
  return {
    scene,
    widthMm: side(scene.section.widthMm),
    heightMm: side(scene.section.heightMm),
    paint: resolveList("paint", scene.paint, previous?.paint),
    sources: resolveList("sources", scene.sources, previous?.sources),
    ports: resolveList("ports", scene.ports, previous?.ports),
    probes: resolveList("probes", scene.probes, previous?.probes),
    parameters,
    mediaById,
    undrawable,
  };
}

/** The drawn form of one item; null where the scene has none or it has no value. */
export function drawnItem(drawing: Drawing, ref: ItemRef): DrawnItem | null {
  const { list, id } = splitRef(ref);
  const items: readonly DrawnItem[] = drawing[list];
  return byId(items).get(id) ?? null;
}
