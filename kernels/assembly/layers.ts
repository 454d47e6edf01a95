/** The loops of runs that lie in absorbing layers along x (columns at the left and right), along y (rows), or both. */
import { VARIED_BYTES, VECTOR_BYTES } from "../src/stepping/wasm/layout";

class Layer {
  /**
   * What stands in for the difference d in a layer: stretch·d + ψ, with ψ ← decay·ψ + gain·d stepped in place. Stretch here is 1/κ.
   */
  @inline
  static stretched(memory: usize, decay: v128, gain: v128, stretch: v128, difference: v128): v128 {
    const psi = f32x4.add(f32x4.mul(decay, v128.load(memory)), f32x4.mul(gain, difference));
    v128.store(memory, psi);
    return f32x4.add(f32x4.mul(stretch, difference), psi);
  }

  /**
   * A run in a layer. `columns` points to the run's first six vectors of decay, gain, stretch of gy and of F; `rowLayer` to the same
   * six numbers of gx and of F of this row. Memory pointers belong to the run's first vector.
   */
  @inline
  static run(
    varied: bool,
    alongX: bool,
    alongY: bool,
    f: usize,
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
    let decayG = f32x4.splat(0);
    let gainG = decayG;
    let stretchG = decayG;
    let decayF = decayG;
    let gainF = decayG;
    let stretchF = decayG;
    if (alongY) {
      decayG = v128.load32_splat(rowLayer, 0);
      gainG = v128.load32_splat(rowLayer, 4);
      stretchG = v128.load32_splat(rowLayer, 8);
      decayF = v128.load32_splat(rowLayer, 12);
      gainF = v128.load32_splat(rowLayer, 16);
      stretchF = v128.load32_splat(rowLayer, 20);
    }
    let above = f + stride;
    let below = gx - stride;
    let left = v128.load(gy - VECTOR_BYTES);
    const end = f + bytes;
    while (f < end) {
      if (varied) {
        aGx = v128.load(numbers, 0);
        bGx = v128.load(numbers, 16);
        aGy = v128.load(numbers, 32);
        bGy = v128.load(numbers, 48);
        aF = v128.load(numbers, 64);
        bF = v128.load(numbers, 80);
        numbers += VARIED_BYTES;
      }
      const here = v128.load(f);
      let dy = f32x4.sub(v128.load(above), here);
      let dx = f32x4.sub(v128.load(f, 4), here);
      if (alongX) {
        dx = Layer.stretched(psiGy, v128.load(columns), v128.load(columns, 16), v128.load(columns, 32), dx);
        psiGy += VECTOR_BYTES;
      }
      if (alongY) {
        dy = Layer.stretched(psiGx, decayG, gainG, stretchG, dy);
        psiGx += VECTOR_BYTES;
      }
      const x = f32x4.sub(f32x4.mul(aGx, v128.load(gx)), f32x4.mul(bGx, dy));
      const y = f32x4.add(f32x4.mul(aGy, v128.load(gy)), f32x4.mul(bGy, dx));
      v128.store(gx, x);
      v128.store(gy, y);
      dx = f32x4.sub(y, v128.shuffle<f32>(left, y, 3, 4, 5, 6));
      dy = f32x4.sub(x, v128.load(below));
      if (alongX) {
        dx = Layer.stretched(
          psiFx,
          v128.load(columns, 48),
          v128.load(columns, 64),
          v128.load(columns, 80),
          dx,
        );
        psiFx += VECTOR_BYTES;
        columns += VARIED_BYTES;
      }
      if (alongY) {
        dy = Layer.stretched(psiFy, decayF, gainF, stretchF, dy);
        psiFy += VECTOR_BYTES;
      }
      v128.store(f, f32x4.add(f32x4.mul(aF, here), f32x4.mul(bF, f32x4.sub(dx, dy))));
      left = y;
      f += VECTOR_BYTES;
      above += VECTOR_BYTES;
      gx += VECTOR_BYTES;
      below += VECTOR_BYTES;
      gy += VECTOR_BYTES;
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
