import type { Scene } from "@heddle/kernels/scene";

/**
 * What changed between two states of a scene, and nothing else: items that were put, changed or taken away by
 * their id, other keys by their value. Undo applies the inverse, so it takes back the user's own change and leaves
 * alone what came from elsewhere in the meantime. Items are shared by reference, never copied.
 */
export interface SceneDiff {
  lists: ListDiff[];
  values: ValueDiff[];
}

const LIST_KEYS = ["media", "paint", "sources", "ports", "probes", "limits"] as const;
type ListKey = (typeof LIST_KEYS)[number];
type Entry = Scene[ListKey][number];

interface ItemChange {
  id: string;
  before: Entry | undefined;
  after: Entry | undefined;
}

/** The stretch of ids between the unchanged head and tail of a list. */
interface OrderChange {
  /** Id that stands before the stretch; null at the head of the list. */
  anchor: string | null;
  before: string[];
  after: string[];
}

interface ListDiff {
  key: ListKey;
  items: ItemChange[];
  order: OrderChange | null;
}

interface ValueDiff {
  key: Exclude<keyof Scene, ListKey>;
  before: unknown;
  after: unknown;
}

export const isEmptyDiff = (diff: SceneDiff): boolean => diff.lists.length + diff.values.length === 0;

const isListKey = (key: string): key is ListKey => LIST_KEYS.some((candidate) => candidate === key);

function diffOrder(before: readonly Entry[], after: readonly Entry[]): OrderChange | null {
  let head = 0;
  const shorter = Math.min(before.length, after.length);
  while (head < shorter && before[head]?.id === after[head]?.id) head += 1;
  if (head === before.length && head === after.length) return null;
  let tail = 0;
  while (tail < shorter - head && before[before.length - 1 - tail]?.id === after[after.length - 1 - tail]?.id)
    tail += 1;
  return {
    anchor: before[head - 1]?.id ?? null,
    before: before.slice(head, before.length - tail).map((item) => item.id),
    after: after.slice(head, after.length - tail).map((item) => item.id),
  };
}

function diffList(key: ListKey, before: readonly Entry[], after: readonly Entry[]): ListDiff | null {
  if (before === after) return null;
  const earlier = new Map(before.map((item) => [item.id, item]));
  const later = new Map(after.map((item) => [item.id, item]));
  const items: ItemChange[] = [];
  for (const [id, item] of earlier) {
    const now = later.get(id);
    if (now !== item) items.push({ id, before: item, after: now });
  }
  for (const [id, item] of later) if (!earlier.has(id)) items.push({ id, before: undefined, after: item });
  const order = diffOrder(before, after);
  return items.length === 0 && order === null ? null : { key, items, order };
}

/** Compares by reference: an edit must replace what it changes and share what it does not. */
export function diffScenes(before: Scene, after: Scene): SceneDiff {
  const diff: SceneDiff = { lists: [], values: [] };
  if (before === after) return diff;
  for (const key of LIST_KEYS) {
    const list = diffList(key, before[key], after[key]);
    if (list !== null) diff.lists.push(list);
  }
  const keys = new Set([...Object.keys(before), ...Object.keys(after)] as (keyof Scene)[]);
  for (const key of keys) {
    if (isListKey(key) || before[key] === after[key]) continue;
    diff.values.push({ key, before: before[key], after: after[key] });
  }
  return diff;
}

export const invertDiff = (diff: SceneDiff): SceneDiff => ({
  lists: diff.lists.map(({ key, items, order }) => ({
    key,
    items: items.map(({ id, before, after }) => ({ id, before: after, after: before })),
    order: order && { anchor: order.anchor, before: order.after, after: order.before },
  })),
  values: diff.values.map(({ key, before, after }) => ({ key, before: after, after: before })),
});

function applyOrder(ids: readonly string[], order: OrderChange): string[] {
  const gone = new Set([...order.before, ...order.after]);
  const rest = ids.filter((id) => !gone.has(id));
  const at = order.anchor === null ? 0 : rest.indexOf(order.anchor) + 1;
  // An anchor that someone else took away: the stretch goes to the end, where it covers, rather than below all.
  const start = order.anchor !== null && at === 0 ? rest.length : at;
  return [...rest.slice(0, start), ...order.after, ...rest.slice(start)];
}

function applyList(items: readonly Entry[], diff: ListDiff): Entry[] {
  const byId = new Map(items.map((item) => [item.id, item]));
  for (const { id, after } of diff.items) {
    if (after === undefined) byId.delete(id);
    else byId.set(id, after);
  }
  const ids = items.map((item) => item.id);
  const ordered = diff.order === null ? ids : applyOrder(ids, diff.order);
  const added = diff.items.map(({ id }) => id).filter((id) => !ordered.includes(id));
  return [...ordered, ...added].flatMap((id) => byId.get(id) ?? []);
}

/** The scene with the change in it. Items that the diff does not name stay as they are. */
export function applyDiff(scene: Scene, diff: SceneDiff): Scene {
  const next = new Map<string, unknown>(Object.entries(scene));
  for (const list of diff.lists) next.set(list.key, applyList(scene[list.key], list));
  for (const { key, after } of diff.values) {
    if (after === undefined) next.delete(key);
    else next.set(key, after);
  }
  // Only whole values taken from scenes were put in place, so the shape is a scene's.
  return Object.fromEntries(next) as unknown as Scene;
}
