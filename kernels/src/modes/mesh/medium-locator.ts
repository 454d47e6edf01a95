/** The medium at any number of points, by cutting the section along the line of each point. */
import type { PaintedArea, Raster } from "../../geometry/index.js";
import { LineCutter } from "../../geometry/index.js";

export class MediumLocator {
  constructor(
    private readonly areas: readonly PaintedArea[],
    private readonly background: number,
    private readonly raster: Raster,
  ) {}

  /** Index of the visible medium at each point (mm). */
  locate(xs: ArrayLike<number>, ys: ArrayLike<number>): Int32Array {
    const { raster } = this;
    const count = xs.length;
    const found = new Int32Array(count);
    const cutter = new LineCutter(this.areas, this.background, raster, "x");
    const order = Array.from({ length: count }, (_, n) => n).sort((p, q) => ys[p] - ys[q]);
    for (const n of order) {
      const x = (xs[n] / raster.widthMm) * raster.columns;
      const y = (ys[n] / raster.heightMm) * raster.rows;
      const interval = cutter.cut(y).find(({ to }) => x < to);
      found[n] = interval?.medium ?? this.background;
    }
    return found;
  }
}
