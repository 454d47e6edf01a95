/** Why a run cannot go on: which medium or source a field that passed every bound points to. */
import type { Lattice } from "../lattice/index.js";
import { cellOfColumn, cellOfRow } from "../lattice/index.js";
import type { ResolvedScene } from "../scene/index.js";
import { mediumAt } from "../scene/index.js";
import type { Engine } from "../stepping/index.js";
import type { DrivePlan, PlannedSource } from "./plan.js";
import type { RunFailure } from "./session.js";

/** Index of the first field point that is not finite; null where all are. */
function firstNonFinite(engine: Engine): { row: number; column: number } | null {
  const { stride } = engine.lattice;
  for (const field of [engine.fields.f, engine.fields.gx, engine.fields.gy]) {
    const k = field.findIndex((value) => !Number.isFinite(value));
    if (k >= 0) return { row: Math.floor(k / stride), column: k % stride };
  }
  return null;
}

const placeMm = (lattice: Lattice, row: number, column: number): [number, number] => [
  Math.min(lattice.nx, Math.max(0, cellOfColumn(lattice, column))) * lattice.dx * 1000,
  Math.min(lattice.ny, Math.max(0, cellOfRow(lattice, row))) * lattice.dy * 1000,
];

/** The first source of which a signal reaches `limit` or is no number. */
function loudSource(
  { sources, signals: width }: DrivePlan,
  blocks: readonly Float64Array[],
  limit: number,
): PlannedSource | null {
  let column = 0;
  for (const source of sources) {
    const end = column + source.generator.signals;
    for (const signals of blocks) {
      for (let n = 0; n < signals.length; n += 1) {
        const within = n % width >= column && n % width < end;
        if (within && !(Math.abs(signals[n]) < limit)) return source;
      }
    }
    column = end;
  }
  return null;
}

/** Names a source whose current itself is no number, else the medium where the field first went wrong. */
export function nonFiniteFailure(
  engine: Engine,
  scene: ResolvedScene,
  drives: DrivePlan,
  signals: readonly Float64Array[],
): RunFailure {
  const step = `step ${engine.step}`;
  const limit = engine.precision === "f32" ? 1e30 : 1e290;
  const loud = loudSource(drives, signals, limit);
  if (loud) {
    return {
      code: "non-finite",
      sentence: `The field is no longer finite at ${step}: the source "${loud.id}" drives more than a number can hold; lower its amplitude or samples.`,
    };
  }
  const at = firstNonFinite(engine);
  if (!at) {
    return {
      code: "non-finite",
      sentence: `The field energy is no longer finite at ${step}; lower the sources' amplitudes.`,
    };
  }
  const [x, y] = placeMm(engine.lattice, at.row, at.column);
  const medium = mediumAt(scene, x, y);
  return {
    code: "non-finite",
    sentence: `The field is no longer finite at ${step}, first in the medium "${medium?.id ?? scene.background}" near x = ${x.toPrecision(4)} mm, y = ${y.toPrecision(4)} mm; check its values and the sources beside it.`,
  };
}
