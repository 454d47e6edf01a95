import type { Polarization, Scene } from "@heddle/kernels/scene";
import { addProbe, addSource, freeId } from "../../document/edits";
import { type ItemRef, makeRef } from "../../document/refs";
import type { Xy } from "../../geometry/points";
import type { Tool, ToolMachine } from "../tool";
import { PlaceIdle } from "./idle";

/** A mark that is set with one press and moved by dragging it. */
export interface MarkKind {
  list: "sources" | "probes";
  label: string;
  moveLabel: string;
  /** Why the scene takes none, or null where it does. */
  refusal: (scene: Scene) => string | null;
  add: (scene: Scene, at: Xy) => { scene: Scene; ref: ItemRef };
}

/** The component along z: the one that a section's scalar field is drawn by. */
const mainComponent = (polarization: Polarization): "Ez" | "Hz" => (polarization === "TMz" ? "Ez" : "Hz");

const SOURCE: MarkKind = {
  list: "sources",
  label: "Place a source",
  moveLabel: "Move the source",
  refusal: (scene) =>
    scene.ports.some((port) => port.drive)
      ? "This scene is driven by its ports. Switch their drive off before placing a source."
      : null,
  add: (scene, [x, y]) => {
    const id = freeId(scene.sources, "source");
    return { scene: addSource(scene, { kind: "line", id, x, y, amplitude: 1 }), ref: makeRef("sources", id) };
  },
};

const PROBE: MarkKind = {
  list: "probes",
  label: "Place a probe",
  moveLabel: "Move the probe",
  refusal: () => null,
  add: (scene, [x, y]) => {
    const taken = new Set(scene.probes.map((probe) => probe.id));
    let number = scene.probes.length + 1;
    while (taken.has(`p${String(number)}`)) number += 1;
    const id = `p${String(number)}`;
    const field = mainComponent(scene.polarization);
    const probe = { kind: "point", id, name: id.toUpperCase(), x, y, field } as const;
    return { scene: addProbe(scene, probe), ref: makeRef("probes", id) };
  },
};

const rest = (kind: MarkKind) => (machine: ToolMachine) => new PlaceIdle(machine, kind);

export const sourceTool: Tool = { id: "source", rest: rest(SOURCE) };
export const probeTool: Tool = { id: "probe", rest: rest(PROBE) };
