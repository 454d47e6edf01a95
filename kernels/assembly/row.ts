/** One step of one row: its runs from left to right, then the memories, the drives, the branches and the taps that lie on it. */
import {
  COLUMN_LAYERS,
  DRIVE_BYTES,
  ENTRY_BRANCHES,
  ENTRY_BYTES,
  ENTRY_COUPLINGS,
  ENTRY_COUPLINGS_END,
  ENTRY_DRIVES,
  ENTRY_DRIVES_END,
  ENTRY_LAYER,
  ENTRY_MEMORIES,
  ENTRY_PSI_FX,
  ENTRY_PSI_FY,
  ENTRY_PSI_GX,
  ENTRY_PSI_GY,
  ENTRY_RUNS,
  ENTRY_RUNS_END,
  ENTRY_TAPS,
  ENTRY_TAPS_END,
  FIELD_F,
  FIELD_GX,
  FIELD_GY,
  LAYER_X,
  LAYER_Y,
  ROW_BYTES,
  RUN_BYTES,
  RUN_FROM,
  RUN_HEADER_BYTES,
  RUN_KIND,
  RUN_LOSSLESS,
  RUN_PSI_SHIFT,
  RUN_UNIFORM,
  RUN_VARIED,
  RUN_ZERO,
  SCALARS_BYTES,
  TABLE,
  TAP_BYTES,
} from "../src/stepping/wasm/layout";
import { coupleRow } from "./couplings";
import { advanceBranches, drawBranches } from "./branches";
import {
  columnLayerUniform,
  columnLayerVaried,
  cornerUniform,
  cornerVaried,
  rowLayerUniform,
  rowLayerVaried,
} from "./layers";
import { losslessRun, uniformRun, variedRun, zeroRun } from "./loops";
import { advanceMemories, correctRow } from "./memories";

/** Bytes of the numbers behind a run's header. */
export function numbersBytes(kind: i32, bytes: usize): usize {
  const form = kind & 3;
  if (form == RUN_VARIED) return bytes * 6;
  return form == RUN_ZERO ? 0 : SCALARS_BYTES;
}

function layerRun(kind: i32, run: usize, entry: usize, f: usize, gx: usize, gy: usize, stride: usize): void {
  const from = load<usize>(run, RUN_FROM);
  const bytes = load<usize>(run, RUN_BYTES);
  const numbers = run + RUN_HEADER_BYTES;
  const shifted = from + load<i32>(run, RUN_PSI_SHIFT);
  const columns = load<usize>(COLUMN_LAYERS) + from * 6;
  const psiGy = load<usize>(entry, ENTRY_PSI_GY) + shifted;
  const psiFx = load<usize>(entry, ENTRY_PSI_FX) + shifted;
  const layer = entry + ENTRY_LAYER;
  const psiGx = load<usize>(entry, ENTRY_PSI_GX) + from;
  const psiFy = load<usize>(entry, ENTRY_PSI_FY) + from;
  switch (kind) {
    case RUN_UNIFORM + LAYER_X:
      columnLayerUniform(f, gx, gy, stride, bytes, numbers, columns, psiGy, psiFx);
      break;
    case RUN_VARIED + LAYER_X:
      columnLayerVaried(f, gx, gy, stride, bytes, numbers, columns, psiGy, psiFx);
      break;
    case RUN_UNIFORM + LAYER_Y:
      rowLayerUniform(f, gx, gy, stride, bytes, numbers, layer, psiGx, psiFy);
      break;
    case RUN_VARIED + LAYER_Y:
      rowLayerVaried(f, gx, gy, stride, bytes, numbers, layer, psiGx, psiFy);
      break;
    case RUN_UNIFORM + LAYER_X + LAYER_Y:
      cornerUniform(f, gx, gy, stride, bytes, numbers, columns, psiGy, psiFx, layer, psiGx, psiFy);
      break;
    default:
      cornerVaried(f, gx, gy, stride, bytes, numbers, columns, psiGy, psiFx, layer, psiGx, psiFy);
  }
}

/** @param signals the step's signals; @param records the step's records */
export function stepRow(row: usize, signals: usize, records: usize): void {
  const stride: usize = load<usize>(ROW_BYTES);
  const base: usize = row * stride;
  const f0 = load<usize>(FIELD_F) + base;
  const gx0 = load<usize>(FIELD_GX) + base;
  const gy0 = load<usize>(FIELD_GY) + base;
  const entry: usize = load<usize>(TABLE) + row * ENTRY_BYTES;
  coupleRow(load<usize>(entry, ENTRY_COUPLINGS), load<usize>(entry, ENTRY_COUPLINGS_END), stride);
  let run: usize = load<usize>(entry, ENTRY_RUNS);
  const runsEnd: usize = load<usize>(entry, ENTRY_RUNS_END);
  while (run < runsEnd) {
    const kind = load<i32>(run, RUN_KIND);
    const from: usize = load<usize>(run, RUN_FROM);
    const bytes: usize = load<usize>(run, RUN_BYTES);
    const numbers = run + RUN_HEADER_BYTES;
    if (kind == RUN_LOSSLESS) {
      losslessRun(f0 + from, gx0 + from, gy0 + from, stride, bytes, numbers);
    } else if (kind == RUN_VARIED) {
      variedRun(f0 + from, gx0 + from, gy0 + from, stride, bytes, numbers);
    } else if (kind == RUN_UNIFORM) {
      uniformRun(f0 + from, gx0 + from, gy0 + from, stride, bytes, numbers);
    } else if (kind == RUN_ZERO) {
      zeroRun(f0 + from, gx0 + from, gy0 + from, bytes);
    } else {
      layerRun(kind, run, entry, f0 + from, gx0 + from, gy0 + from, stride);
    }
    run = numbers + numbersBytes(kind, bytes);
  }
  const memories: usize = load<usize>(entry, ENTRY_MEMORIES);
  if (memories != 0) correctRow(memories, f0, gx0, gy0);
  let drive: usize = load<usize>(entry, ENTRY_DRIVES);
  const drivesEnd: usize = load<usize>(entry, ENTRY_DRIVES_END);
  for (; drive < drivesEnd; drive += DRIVE_BYTES) {
    const at: usize = load<usize>(drive);
    const signal = load<f64>(signals + load<usize>(drive, 4));
    store<f32>(at, <f32>(<f64>load<f32>(at) - load<f64>(drive, 8) * signal));
  }
  const branches: usize = load<usize>(entry, ENTRY_BRANCHES);
  if (branches != 0) drawBranches(branches);
  if (memories != 0) advanceMemories(memories, base);
  if (branches != 0) advanceBranches(branches);
  let tap: usize = load<usize>(entry, ENTRY_TAPS);
  const tapsEnd: usize = load<usize>(entry, ENTRY_TAPS_END);
  for (; tap < tapsEnd; tap += TAP_BYTES) {
    const record = records + load<usize>(tap, 4);
    store<f64>(record, load<f64>(record) + load<f64>(tap, 8) * <f64>load<f32>(load<usize>(tap)));
  }
}
