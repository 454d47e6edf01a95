/** What the kernel reads once: the control block, and of the row table what the absorbing layers need. */
import type { Lattice } from "../../lattice/index.js";
import type { EngineField } from "../engine.js";
import type { Arena } from "./arena.js";
import * as at from "./layout.js";
import type { LayerStrips } from "./strips.js";

interface Places {
  fields: Readonly<Record<EngineField, number>>;
  table: number;
  records: number;
  /** Of one step. */
  recordBytes: number;
  energySums: number;
  /** Looks at the memory before a waiting thread sleeps. */
  spins: number;
}

export function writeControl(arena: Arena, lattice: Lattice, places: Places): void {
  const { i32, f64 } = arena;
  i32[at.FIELD_F / 4] = places.fields.f;
  i32[at.FIELD_GX / 4] = places.fields.gx;
  i32[at.FIELD_GY / 4] = places.fields.gy;
  i32[at.ROW_BYTES / 4] = lattice.stride * 4;
  i32[at.LAST_ROW / 4] = lattice.rows;
  i32[at.TABLE / 4] = places.table;
  i32[at.RECORDS / 4] = places.records;
  i32[at.RECORD_BYTES / 4] = places.recordBytes;
  i32[at.ENERGY_SUMS / 4] = places.energySums;
  f64[at.QUARTER_STEP / 8] = lattice.dt / 4;
  i32[at.SPINS / 4] = places.spins;
}

/** Where each row has its ψ, and the parameters of the layers. */
export function writeLayers(arena: Arena, lattice: Lattice, table: number, strips: LayerStrips): void {
  const { i32, f32 } = arena;
  i32[at.COLUMN_LAYERS / 4] = strips.columnParameters;
  for (let j = 0; j <= lattice.rows + 1; j += 1) {
    const entry = table + j * at.ENTRY_BYTES;
    i32[(entry + at.ENTRY_PSI_GY) / 4] = strips.psiGyOf(j);
    i32[(entry + at.ENTRY_PSI_FX) / 4] = strips.psiFxOf(j);
    i32[(entry + at.ENTRY_PSI_GX) / 4] = strips.psiGxOf(j);
    i32[(entry + at.ENTRY_PSI_FY) / 4] = strips.psiFyOf(j);
    f32.set(strips.rowParameters(j), (entry + at.ENTRY_LAYER) / 4);
  }
}
