/** The loops of runs that lie in absorbing layers along x (columns at the left and right), along y (rows), or both. */
import { VARIED_BYTES, VECTOR_BYTES } from "../src/stepping/wasm/layout";

class Layer {
  /** A difference with the layer's memory: b·(ψ + stretch·d), with ψ stepped in place. */
  @inline
  static share(memory: usize, decay: v128, gain: v128, stretch: v128, difference: v128, b: v128): v128 {
    const psi = f32x4.add(f32x4.mul(decay, v128.load(memory)), f32x4.mul(gain, difference));
    v128.store(memory, psi);
    return f32x4.mul(b, f32x4.add(psi, f32x4.mul(stretch, difference)));
  }

  /**
   * A run in a layer. `columns` points to the run's first six vectors of decay, gain, stretch of gy and of F; `row` to the same
   * six numbers of gx and of F of this row. Memory pointers belong to the run's first vector.
   */
  @inline
  static run(
    varied: bool,
    alongX: bool,
    alongY: bool,
    row: usize,
    gx: usize,
    gy: usize,
    stride: usize,
    bytes: usize,
    numbers: usize,
    columns: usize,
    psiGy: usize,
    psiFx: usize,
    rowLayer: usize,
    psiGx: usize,
    psiFy: usize,
  ): void {
    let aGx = v128.load32_splat(numbers, 0);
    let bGx = v128.load32_splat(numbers, 4);
    let aGy = v128.load32_splat(numbers, 8);
    let bGy = v128.load32_splat(numbers, 12);
    let aF = v128.load32_splat(numbers, 16);
    let bF = v128.load32_splat(numbers, 20);
    let left = v128.load(gy - VECTOR_BYTES);
    for (let at: usize = 0; at < bytes; at += VECTOR_BYTES) {
      if (varied) {
        aGx = v128.load(numbers, 0);
        bGx = v128.load(numbers, 16);
        aGy = v128.load(numbers, 32);
        bGy = v128.load(numbers, 48);
        aF = v128.load(numbers, 64);
        bF = v128.load(numbers, 80);
        numbers += VARIED_BYTES;
      }
      const here = v128.load(row + at);
      const dy = f32x4.sub(v128.load(row + stride + at), here);
      const dx = f32x4.sub(v128.load(row + at, 4), here);
      let x = f32x4.sub(f32x4.mul(aGx, v128.load(gx + at)), f32x4.mul(bGx, dy));
      let y = f32x4.add(f32x4.mul(aGy, v128.load(gy + at)), f32x4.mul(bGy, dx));
      if (alongX) {
        const decay = v128.load(columns, 0);
        y = f32x4.add(
          y,
          Layer.share(psiGy + at, decay, v128.load(columns, 16), v128.load(columns, 32), dx, bGy),
        );
      }
      if (alongY) {
        const decay = v128.load32_splat(rowLayer, 0);
        const gain = v128.load32_splat(rowLayer, 4);
        x = f32x4.sub(x, Layer.share(psiGx + at, decay, gain, v128.load32_splat(rowLayer, 8), dy, bGx));
      }
      v128.store(gx + at, x);
      v128.store(gy + at, y);
      const ddx = f32x4.sub(y, v128.shuffle<f32>(left, y, 3, 4, 5, 6));
      const ddy = f32x4.sub(x, v128.load(gx + at - stride));
      let f = f32x4.add(f32x4.mul(aF, here), f32x4.mul(bF, f32x4.sub(ddx, ddy)));
      if (alongX) {
        const decay = v128.load(columns, 48);
        f = f32x4.add(
          f,
          Layer.share(psiFx + at, decay, v128.load(columns, 64), v128.load(columns, 80), ddx, bF),
        );
        columns += VARIED_BYTES;
      }
      if (alongY) {
        const decay = v128.load32_splat(rowLayer, 12);
        const gain = v128.load32_splat(rowLayer, 16);
        f = f32x4.sub(f, Layer.share(psiFy + at, decay, gain, v128.load32_splat(rowLayer, 20), ddy, bF));
      }
      v128.store(row + at, f);
      left = y;
    }
  }
}

export function columnLayerUniform(
  f: usize,
  gx: usize,
  gy: usize,
  stride: usize,
  bytes: usize,
  numbers: usize,
  columns: usize,
  psiGy: usize,
  psiFx: usize,
): void {
  Layer.run(false, true, false, f, gx, gy, stride, bytes, numbers, columns, psiGy, psiFx, 0, 0, 0);
}

export function columnLayerVaried(
  f: usize,
  gx: usize,
  gy: usize,
  stride: usize,
  bytes: usize,
  numbers: usize,
  columns: usize,
  psiGy: usize,
  psiFx: usize,
): void {
  Layer.run(true, true, false, f, gx, gy, stride, bytes, numbers, columns, psiGy, psiFx, 0, 0, 0);
}

export function rowLayerUniform(
  f: usize,
  gx: usize,
  gy: usize,
  stride: usize,
  bytes: usize,
  numbers: usize,
  layer: usize,
  psiGx: usize,
  psiFy: usize,
): void {
  Layer.run(false, false, true, f, gx, gy, stride, bytes, numbers, 0, 0, 0, layer, psiGx, psiFy);
}

export function rowLayerVaried(
  f: usize,
  gx: usize,
  gy: usize,
  stride: usize,
  bytes: usize,
  numbers: usize,
  layer: usize,
  psiGx: usize,
  psiFy: usize,
): void {
  Layer.run(true, false, true, f, gx, gy, stride, bytes, numbers, 0, 0, 0, layer, psiGx, psiFy);
}

export function cornerUniform(
  f: usize,
  gx: usize,
  gy: usize,
  stride: usize,
  bytes: usize,
  numbers: usize,
  columns: usize,
  psiGy: usize,
  psiFx: usize,
  layer: usize,
  psiGx: usize,
  psiFy: usize,
): void {
  Layer.run(false, true, true, f, gx, gy, stride, bytes, numbers, columns, psiGy, psiFx, layer, psiGx, psiFy);
}

export function cornerVaried(
  f: usize,
  gx: usize,
  gy: usize,
  stride: usize,
  bytes: usize,
  numbers: usize,
  columns: usize,
  psiGy: usize,
  psiFx: usize,
  layer: usize,
  psiGx: usize,
  psiFy: usize,
): void {
  Layer.run(true, true, true, f, gx, gy, stride, bytes, numbers, columns, psiGy, psiFx, layer, psiGx, psiFy);
}
