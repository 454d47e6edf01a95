/**
 * The loops that step one run of one row: G of the row, then F, four columns at a time. Each is the same update with other
 * things known beforehand, so all of them give the same bits where they could stand for one another:
 *
 *   gx ← aGx·gx − bGx·(F[above] − F)    gy ← aGy·gy + bGy·(F[right] − F)
 *   F  ← aF·F + bF·((gy − gy[left]) − (gx − gx[below]))
 *
 * and in the absorbing layers a difference d is replaced by d/κ + ψ, ψ ← decay·ψ + gain·d.
 */
import { TURN_VECTORS, VARIED_BYTES, VECTOR_BYTES } from "../src/stepping/wasm/layout";

/** What is known of a run when its loop is compiled. */
const LOSSLESS: i32 = 0;
const UNIFORM: i32 = 1;
const VARIED: i32 = 2;

/** Places of the vectors of a turn, as types: an address's offset must be known when a generic function is made. */
@unmanaged
class First {}
@unmanaged
class Second extends First {
  before: u64;
  half: u64;
}
@unmanaged
class Third extends Second {
  before2: u64;
  half2: u64;
}
@unmanaged
class Fourth extends Third {
  before3: u64;
  half3: u64;
}

class Update {
  /**
   * The vector at place `At` behind the run's pointers. `left` is the new gy of the vector before; the new gy is given back.
   * `aGx` … `bF` serve where the coefficients do not come from `varied`.
   */
  @inline
  static plain<At>(
    kind: i32,
    f: usize,
    above: usize,
    gx: usize,
    below: usize,
    gy: usize,
    left: v128,
    varied: usize,
    aGx: v128,
    bGx: v128,
    aGy: v128,
    bGy: v128,
    aF: v128,
    bF: v128,
  ): v128 {
    const here = v128.load(f, offsetof<At>());
    let x = v128.load(gx, offsetof<At>());
    let y = v128.load(gy, offsetof<At>());
    const dy = f32x4.sub(v128.load(above, offsetof<At>()), here);
    const dx = f32x4.sub(v128.load(f, offsetof<At>() + 4), here);
    if (kind == LOSSLESS) {
      x = f32x4.sub(x, f32x4.mul(bGx, dy));
      y = f32x4.add(y, f32x4.mul(bGy, dx));
    } else if (kind == UNIFORM) {
      x = f32x4.sub(f32x4.mul(aGx, x), f32x4.mul(bGx, dy));
      y = f32x4.add(f32x4.mul(aGy, y), f32x4.mul(bGy, dx));
    } else {
      x = f32x4.sub(
        f32x4.mul(v128.load(varied, offsetof<At>() * 6), x),
        f32x4.mul(v128.load(varied, offsetof<At>() * 6 + 16), dy),
      );
      y = f32x4.add(
        f32x4.mul(v128.load(varied, offsetof<At>() * 6 + 32), y),
        f32x4.mul(v128.load(varied, offsetof<At>() * 6 + 48), dx),
      );
    }
    v128.store(gx, x, offsetof<At>());
    v128.store(gy, y, offsetof<At>());
    const curl = f32x4.sub(
      f32x4.sub(y, v128.shuffle<f32>(left, y, 3, 4, 5, 6)),
      f32x4.sub(x, v128.load(below, offsetof<At>())),
    );
    if (kind == LOSSLESS) {
      v128.store(f, f32x4.add(here, f32x4.mul(bF, curl)), offsetof<At>());
    } else if (kind == UNIFORM) {
      v128.store(f, f32x4.add(f32x4.mul(aF, here), f32x4.mul(bF, curl)), offsetof<At>());
    } else {
      v128.store(
        f,
        f32x4.add(
          f32x4.mul(v128.load(varied, offsetof<At>() * 6 + 64), here),
          f32x4.mul(v128.load(varied, offsetof<At>() * 6 + 80), curl),
        ),
        offsetof<At>(),
      );
    }
    return y;
  }

  /** The whole of a plain run. */
  @inline
  static run(kind: i32, row: usize, gx: usize, gy: usize, stride: usize, bytes: usize, numbers: usize): void {
    let f = row;
    let above = row + stride;
    let below = gx - stride;
    let varied = numbers;
    let aGx = f32x4.splat(0);
    let bGx = aGx;
    let aGy = aGx;
    let bGy = aGx;
    let aF = aGx;
    let bF = aGx;
    if (kind != VARIED) {
      aGx = v128.load32_splat(numbers, 0);
      bGx = v128.load32_splat(numbers, 4);
      aGy = v128.load32_splat(numbers, 8);
      bGy = v128.load32_splat(numbers, 12);
      aF = v128.load32_splat(numbers, 16);
      bF = v128.load32_splat(numbers, 20);
    }
    let left = v128.load(gy - VECTOR_BYTES);
    const end = f + bytes;
    // Runs of one medium are cut to whole turns; those whose coefficients vary are short.
    while (f < end) {
      left = Update.plain<First>(kind, f, above, gx, below, gy, left, varied, aGx, bGx, aGy, bGy, aF, bF);
      if (kind != VARIED) {
        left = Update.plain<Second>(kind, f, above, gx, below, gy, left, varied, aGx, bGx, aGy, bGy, aF, bF);
        left = Update.plain<Third>(kind, f, above, gx, below, gy, left, varied, aGx, bGx, aGy, bGy, aF, bF);
        left = Update.plain<Fourth>(kind, f, above, gx, below, gy, left, varied, aGx, bGx, aGy, bGy, aF, bF);
      }
      const turn = kind == VARIED ? VECTOR_BYTES : TURN_VECTORS * VECTOR_BYTES;
      f += turn;
      above += turn;
      gx += turn;
      below += turn;
      gy += turn;
      if (kind == VARIED) varied += VARIED_BYTES;
    }
  }
}

export function losslessRun(
  f: usize,
  gx: usize,
  gy: usize,
  stride: usize,
  bytes: usize,
  numbers: usize,
): void {
  Update.run(LOSSLESS, f, gx, gy, stride, bytes, numbers);
}

export function uniformRun(
  f: usize,
  gx: usize,
  gy: usize,
  stride: usize,
  bytes: usize,
  numbers: usize,
): void {
  Update.run(UNIFORM, f, gx, gy, stride, bytes, numbers);
}

export function variedRun(f: usize, gx: usize, gy: usize, stride: usize, bytes: usize, numbers: usize): void {
  Update.run(VARIED, f, gx, gy, stride, bytes, numbers);
}

/** A run on which nothing can live. */
export function zeroRun(f: usize, gx: usize, gy: usize, bytes: usize): void {
  const zero = f32x4.splat(0);
  for (let at: usize = 0; at < bytes; at += VECTOR_BYTES) {
    v128.store(f + at, zero);
    v128.store(gx + at, zero);
    v128.store(gy + at, zero);
  }
}
