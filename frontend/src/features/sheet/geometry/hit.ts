import type { Drawing } from "../document/drawing";
import { byId, type ItemRef, makeRef, splitRef } from "../document/refs";
import { boxHolds, boxOf, distance, distanceToSegment, type BoxMm, type Xy } from "./points";
import { patchBox, patchCovers, portBox, probeBox, rectangleCorners } from "./shapes";

/** The item under a point: marks first, for they are small, then lines over areas, later paint over earlier. */
export function itemAt(drawing: Drawing, at: Xy, reachMm: number): ItemRef | null {
  for (const probe of drawing.probes.toReversed()) {
    const ref = makeRef("probes", probe.id);
    if (probe.kind === "point" && distance(at, [probe.x, probe.y]) <= reachMm * 1.6) return ref;
    if (probe.kind === "line" && distanceToSegment(at, probe.from, probe.to) <= reachMm) return ref;
  }
  for (const source of drawing.sources.toReversed())
    if (source.kind === "line" && distance(at, [source.x, source.y]) <= reachMm * 1.6)
      return makeRef("sources", source.id);
  for (const port of drawing.ports.toReversed())
    if (distanceToSegment(at, port.from, port.to) <= reachMm) return makeRef("ports", port.id);
  for (const areas of [false, true])
    for (const patch of drawing.paint.toReversed())
      if ("medium" in patch === areas && patchCovers(patch, at, reachMm)) return makeRef("paint", patch.id);
  // An area probe lies over paint and must not hide it: only its rim counts.
  for (const probe of drawing.probes.toReversed())
    if (probe.kind === "area") {
      const corners = rectangleCorners(probe);
      const rim = corners.some((corner, i) => {
        const next = corners[(i + 1) % corners.length];
        return distanceToSegment(at, corner, next) <= reachMm;
      });
      if (rim) return makeRef("probes", probe.id);
    }
  return null;
}

/** The box of an item on the drawing; null where it has no place or no value. */
export function itemBox(drawing: Drawing, ref: ItemRef): BoxMm | null {
  const { list, id } = splitRef(ref);
  switch (list) {
    case "paint": {
      const patch = byId(drawing.paint).get(id);
      return patch === undefined ? null : patchBox(patch);
    }
    case "probes": {
      const probe = byId(drawing.probes).get(id);
      return probe === undefined ? null : probeBox(probe);
    }
    case "ports": {
      const port = byId(drawing.ports).get(id);
      return port === undefined ? null : portBox(port);
    }
    case "sources": {
      const source = byId(drawing.sources).get(id);
      return source?.kind === "line" ? boxOf([[source.x, source.y]]) : null;
    }
  }
}

/** Every item that lies wholly within the box. */
export function itemsWithin(drawing: Drawing, box: BoxMm): ItemRef[] {
  const refs: ItemRef[] = [];
  for (const patch of drawing.paint)
    if (boxHolds(box, patchBox(patch))) refs.push(makeRef("paint", patch.id));
  for (const source of drawing.sources)
    if (source.kind === "line" && boxHolds(box, boxOf([[source.x, source.y]])))
      refs.push(makeRef("sources", source.id));
  for (const port of drawing.ports) if (boxHolds(box, portBox(port))) refs.push(makeRef("ports", port.id));
  for (const probe of drawing.probes)
    if (boxHolds(box, probeBox(probe))) refs.push(makeRef("probes", probe.id));
  return refs;
}
