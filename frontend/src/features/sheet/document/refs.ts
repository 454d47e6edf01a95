import type { Patch, Port, Probe, Scene, Source } from "@heddle/kernels/scene";

/** The lists of a scene whose items can be picked on the sheet. Ids are unique within one list only. */
export const PICKABLE_LISTS = ["paint", "sources", "ports", "probes"] as const;
export type PickableList = (typeof PICKABLE_LISTS)[number];

/** Names one item on the sheet: its list and its id. */
export type ItemRef = `${PickableList}:${string}`;

export interface ItemOf {
  paint: Patch;
  sources: Source;
  ports: Port;
  probes: Probe;
}
export type Item = ItemOf[PickableList];

export const makeRef = (list: PickableList, id: string): ItemRef => `${list}:${id}`;

export function splitRef(ref: ItemRef): { list: PickableList; id: string } {
  const colon = ref.indexOf(":");
  const name = ref.slice(0, colon);
  const list = PICKABLE_LISTS.find((candidate) => candidate === name);
  if (list === undefined) throw new RangeError(`"${ref}" names no list of the scene.`);
  return { list, id: ref.slice(colon + 1) };
}

const indices = new WeakMap<readonly { id: string }[], ReadonlyMap<string, { id: string }>>();

/** The items of a list by id. Kept per list, for lists are replaced and never changed in place. */
export function byId<T extends { id: string }>(items: readonly T[]): ReadonlyMap<string, T> {
  let index = indices.get(items);
  if (index === undefined) {
    index = new Map(items.map((item) => [item.id, item]));
    indices.set(items, index);
  }
  // The index was built from these very items.
  return index as ReadonlyMap<string, T>;
}

/** The item that `ref` names, or undefined where the scene no longer has it. */
export function findItem(scene: Scene, ref: ItemRef): Item | undefined {
  const { list, id } = splitRef(ref);
  const items: readonly Item[] = scene[list];
  return byId(items).get(id);
}

/** The selected item where there is exactly one. */
export const onlyRef = (selection: ReadonlySet<ItemRef>): ItemRef | undefined =>
  selection.size === 1 ? selection.values().next().value : undefined;

export const findPatch = (scene: Scene, ref: ItemRef): Patch | undefined => {
  const { list, id } = splitRef(ref);
  return list === "paint" ? byId(scene.paint).get(id) : undefined;
};

/** Every item of the scene, in painting order and then sources, ports, probes. */
export const allRefs = (scene: Scene): ItemRef[] =>
  PICKABLE_LISTS.flatMap((list) => scene[list].map((item) => makeRef(list, item.id)));
