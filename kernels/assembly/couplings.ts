/** What oblique interfaces add before a row is stepped: where four G's meet (see `Coupling` in the engine's interface). */
import { COUPLING_BYTES, COUPLING_FACTOR, COUPLING_GX, COUPLING_GY } from "../src/stepping/wasm/layout";

/** @param stride bytes from one row to the next */
export function coupleRow(first: usize, end: usize, stride: usize): void {
  for (let at = first; at < end; at += COUPLING_BYTES) {
    const f = load<usize>(at);
    const gx = load<usize>(at, COUPLING_GX);
    const gy = load<usize>(at, COUPLING_GY);
    const factor = load<f32>(at, COUPLING_FACTOR);
    const above = f + stride;
    const own = load<f32>(f);
    const right = load<f32>(f, 4);
    const up = load<f32>(above);
    const both = load<f32>(above, 4);
    const alongX = factor * (right - own + (both - up));
    const alongY = factor * (up - own + (both - right));
    store<f32>(gx, load<f32>(gx) + alongX);
    store<f32>(gx, load<f32>(gx, 4) + alongX, 4);
    store<f32>(gy, load<f32>(gy) - alongY);
    const next = gy + stride;
    store<f32>(next, load<f32>(next) - alongY);
  }
}
