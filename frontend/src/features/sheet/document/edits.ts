import type { Length, Medium, Patch, Port, Probe, Scene, Source } from "@heddle/kernels/scene";
import { type Item, type ItemOf, type ItemRef, makeRef, type PickableList, splitRef } from "./refs";
import { shiftLength } from "./lengths";

/** Pure changes of a scene. Each replaces what it changes and shares all else, as diffs expect. */

/** `base-1`, `base-2`, …: the first that no entry of the list has, at most 40 characters. */
export function freeId(taken: Iterable<{ id: string }>, base: string): string {
  const ids = new Set([...taken].map(({ id }) => id));
  const stem = base.replace(/-\d+$/, "").slice(0, 33);
  for (let i = 1; ; i += 1) {
    const id = `${stem}-${String(i)}`;
    if (!ids.has(id)) return id;
  }
}

/** An id made of a person's words: "Rubber sheet, 2 mm" becomes "rubber-sheet-2-mm". */
export function idFromName(taken: Iterable<{ id: string }>, name: string): string {
  const words = name
    .normalize("NFKD")
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, "-")
    .replace(/^-+|-+$/g, "")
    .slice(0, 33);
  const base = words === "" ? "medium" : words;
  return [...taken].some(({ id }) => id === base) ? freeId(taken, base) : base;
}

export const addPatch = (scene: Scene, patch: Patch): Scene => ({ ...scene, paint: [...scene.paint, patch] });
export const addSource = (scene: Scene, source: Source): Scene => ({
  ...scene,
  sources: [...scene.sources, source],
});
export const addProbe = (scene: Scene, probe: Probe): Scene => ({
  ...scene,
  probes: [...scene.probes, probe],
});

const withList = <List extends PickableList>(
  scene: Scene,
  list: List,
  map: (items: readonly ItemOf[List][]) => ItemOf[List][],
): Scene => {
  const items: readonly ItemOf[List][] = scene[list] as unknown as ItemOf[List][];
  return { ...scene, [list]: map(items) };
};

/** Runs `change` on the items that `refs` name, list by list. */
export function changeItems(
  scene: Scene,
  refs: Iterable<ItemRef>,
  change: (item: Item, ref: ItemRef) => Item,
): Scene {
  const byList = new Map<PickableList, Set<string>>();
  for (const ref of refs) {
    const { list, id } = splitRef(ref);
    byList.set(list, (byList.get(list) ?? new Set()).add(id));
  }
  let next = scene;
  for (const [list, ids] of byList)
    next = withList<PickableList>(next, list, (items) =>
      items.map((item) => (ids.has(item.id) ? change(item, makeRef(list, item.id)) : item)),
    );
  return next;
}

export function removeItems(scene: Scene, refs: Iterable<ItemRef>): Scene {
  const gone = new Set(refs);
  let next = scene;
  for (const list of new Set([...gone].map((ref) => splitRef(ref).list)))
    next = withList<PickableList>(next, list, (items) =>
      items.filter((item) => !gone.has(makeRef(list, item.id))),
    );
  return next;
}

type Point = [Length, Length];
const shiftPoint = ([x, y]: Point, dx: number, dy: number): Point => [shiftLength(x, dx), shiftLength(y, dy)];

function shiftPatch(patch: Patch, dx: number, dy: number): Patch {
  switch (patch.kind) {
    case "rectangle":
    case "ellipse":
      return { ...patch, x: shiftLength(patch.x, dx), y: shiftLength(patch.y, dy) };
    case "polygon":
      return {
        ...patch,
        points: patch.points.map((point) => shiftPoint(point, dx, dy)),
        holes: patch.holes.map((hole) => hole.map((point) => shiftPoint(point, dx, dy))),
      };
    default:
      return { ...patch, points: patch.points.map((point) => shiftPoint(point, dx, dy)) };
  }
}

/** The item moved by (dx, dy) mm; lengths that are expressions keep their words. A plane wave has no place. */
export function shiftItem(item: Item, ref: ItemRef, dx: number, dy: number): Item {
  const { list } = splitRef(ref);
  if (list === "paint") return shiftPatch(item as Patch, dx, dy);
  const placed = item as Source | Port | Probe;
  if ("x" in placed) return { ...placed, x: shiftLength(placed.x, dx), y: shiftLength(placed.y, dy) };
  if ("from" in placed)
    return { ...placed, from: shiftPoint(placed.from, dx, dy), to: shiftPoint(placed.to, dx, dy) };
  return placed;
}

export const shiftItems = (scene: Scene, refs: Iterable<ItemRef>, dx: number, dy: number): Scene =>
  dx === 0 && dy === 0 ? scene : changeItems(scene, refs, (item, ref) => shiftItem(item, ref, dx, dy));

/** Copies of the items, moved by (dx, dy), on top of their lists; gives the copies' refs. */
export function duplicateItems(
  scene: Scene,
  refs: Iterable<ItemRef>,
  dx: number,
  dy: number,
): { scene: Scene; copies: ItemRef[] } {
  const wanted = new Set(refs);
  const copies: ItemRef[] = [];
  let next = scene;
  for (const list of new Set([...wanted].map((ref) => splitRef(ref).list)))
    next = withList<PickableList>(next, list, (items) => {
      const all = [...items];
      for (const item of items) {
        const ref = makeRef(list, item.id);
        if (!wanted.has(ref)) continue;
        const copy = { ...shiftItem(item, ref, dx, dy), id: freeId(all, item.id) };
        all.push(copy);
        copies.push(makeRef(list, copy.id));
      }
      return all;
    });
  return { scene: next, copies };
}

export const putMedium = (scene: Scene, medium: Medium): Scene => {
  const known = scene.media.some(({ id }) => id === medium.id);
  return {
    ...scene,
    media: known
      ? scene.media.map((other) => (other.id === medium.id ? medium : other))
      : [...scene.media, medium],
  };
};

export const removeMedium = (scene: Scene, id: string): Scene => ({
  ...scene,
  media: scene.media.filter((medium) => medium.id !== id),
});

/** How many patches are made of each medium. */
export function mediumUsage(scene: Scene): ReadonlyMap<string, number> {
  const usage = new Map<string, number>();
  for (const patch of scene.paint)
    if ("medium" in patch) usage.set(patch.medium, (usage.get(patch.medium) ?? 0) + 1);
  return usage;
}
