/**
 * Pictures of the field: a quantity on the section's cell centres, averaged by area onto the raster asked for.
 *
 * Components are means of their nearest field points: four nodes or two edges around a centre. Magnitudes and densities are
 * formed at the centres, densities as the energy or loss of the surrounding field points that falls into the cell.
 */
import type { FieldQuantity, FieldSample, ViewRequest } from "../frames/index.js";
import type { Lattice } from "../lattice/index.js";
import { columnShare, firstColumn, firstRow, rowShare } from "../lattice/index.js";
import { halfStorage, lossOf } from "../media/index.js";
import type { Engine, EngineFields, RowCoefficients } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";

export const quantitiesOf = (polarization: "TMz" | "TEz"): readonly FieldQuantity[] =>
  polarization === "TMz"
    ? ["Ez", "Hx", "Hy", "absE", "absH", "energyDensity", "lossDensity"]
    : ["Hz", "Ex", "Ey", "absE", "absH", "energyDensity", "lossDensity"];

/** Writes row `cellRow` (0 … ny − 1) of a quantity at the cell centres. */
type RowReader = (cellRow: number, out: Float64Array) => void;

/** The three fields at the centres of one row of cells. */
class CentreReader {
  private readonly onNodes: boolean;
  private readonly left: number;
  private readonly bottom: number;
  private readonly columnLengths: Float64Array;

  constructor(
    private readonly lattice: Lattice,
    private readonly fields: EngineFields,
  ) {
    this.onNodes = lattice.polarization === "TMz";
    this.left = firstColumn(lattice);
    this.bottom = firstRow(lattice);
    this.columnLengths = Float64Array.from(
      { length: lattice.columns + 2 },
      (_, i) => lattice.dx * columnShare(lattice, i),
    );
  }

  f: RowReader = (cellRow, out) => {
    const { f } = this.fields;
    const { nx, stride } = this.lattice;
    const k0 = (this.bottom + cellRow) * stride + this.left;
    if (!this.onNodes) {
      for (let i = 0; i < nx; i += 1) out[i] = f[k0 + i];
      return;
    }
    for (let i = 0, k = k0; i < nx; i += 1, k += 1) {
      out[i] = 0.25 * (f[k] + f[k + 1] + f[k + stride] + f[k + stride + 1]);
    }
  };

  /** Gx = gx/Δx. */
  gx: RowReader = (cellRow, out) => {
    const { gx } = this.fields;
    const { nx, stride } = this.lattice;
    const k0 = (this.bottom + cellRow) * stride + this.left;
    if (this.onNodes) {
      const { columnLengths, left } = this;
      for (let i = 0, k = k0; i < nx; i += 1, k += 1) {
        out[i] = 0.5 * (gx[k] / columnLengths[left + i] + gx[k + 1] / columnLengths[left + i + 1]);
      }
      return;
    }
    const scale = 0.5 / this.lattice.dx;
    for (let i = 0, k = k0; i < nx; i += 1, k += 1) out[i] = scale * (gx[k - stride] + gx[k]);
  };

  /** Gy = gy/Δy. */
  gy: RowReader = (cellRow, out) => {
    const { gy } = this.fields;
    const { nx, stride, dy } = this.lattice;
    const row = this.bottom + cellRow;
    const k0 = row * stride + this.left;
    if (this.onNodes) {
      const lower = 0.5 / (dy * rowShare(this.lattice, row));
      const upper = 0.5 / (dy * rowShare(this.lattice, row + 1));
      for (let i = 0, k = k0; i < nx; i += 1, k += 1) out[i] = lower * gy[k] + upper * gy[k + stride];
      return;
    }
    const scale = 0.5 / dy;
    for (let i = 0, k = k0; i < nx; i += 1, k += 1) out[i] = scale * (gy[k - 1] + gy[k]);
  };
}

type PointValue = (a: number, b: number) => number;

/** Σ value(a, b)·v² of the field points around each cell, by the share of their cell that lies in it, per cell area. */
class DensityReader {
  private readonly rows = new Map<number, RowCoefficients>();

  constructor(
    private readonly engine: Engine,
    private readonly value: PointValue,
  ) {}

  private coefficients(row: number): RowCoefficients {
    const known = this.rows.get(row);
    if (known) return known;
    const made = rowCoefficients(this.engine.lattice.stride);
    this.engine.readCoefficients(row, made);
    this.rows.set(row, made);
    this.rows.delete(row - 2);
    return made;
  }

  read: RowReader = (cellRow, out) => {
    const { lattice, fields } = this.engine;
    const { nx, stride, dx, dy } = lattice;
    const { f, gx, gy } = fields;
    const { value } = this;
    const left = firstColumn(lattice);
    const row = firstRow(lattice) + cellRow;
    const area = 1 / (dx * dy);
    if (lattice.polarization === "TMz") {
      const lower = this.coefficients(row);
      const upper = this.coefficients(row + 1);
      const lowerShare = rowShare(lattice, row);
      const upperShare = rowShare(lattice, row + 1);
      const node = (c: RowCoefficients, base: number, i: number, share: number): number =>
        (value(c.aF[i], c.bF[i]) * f[base + i] ** 2) / (share * columnShare(lattice, i));
      for (let n = 0; n < nx; n += 1) {
        const i = left + n;
        const k = row * stride;
        const fPart =
          node(lower, k, i, lowerShare) +
          node(lower, k, i + 1, lowerShare) +
          node(upper, k + stride, i, upperShare) +
          node(upper, k + stride, i + 1, upperShare);
        const gxPart =
          (value(lower.aGx[i], lower.bGx[i]) * gx[k + i] ** 2) / columnShare(lattice, i) +
          (value(lower.aGx[i + 1], lower.bGx[i + 1]) * gx[k + i + 1] ** 2) / columnShare(lattice, i + 1);
        const gyPart =
          (value(lower.aGy[i], lower.bGy[i]) * gy[k + i] ** 2) / lowerShare +
          (value(upper.aGy[i], upper.bGy[i]) * gy[k + stride + i] ** 2) / upperShare;
        out[n] = area * (0.25 * fPart + 0.5 * (gxPart + gyPart));
      }
      return;
    }
    const below = this.coefficients(row - 1);
    const here = this.coefficients(row);
    const wall = (side: "left" | "right" | "bottom" | "top", at: boolean): number =>
      at && lattice.edges[side] === "magnetic" ? 2 : 1;
    for (let n = 0; n < nx; n += 1) {
      const i = left + n;
      const k = row * stride + i;
      const fPart = value(here.aF[i], here.bF[i]) * f[k] ** 2;
      const gxPart =
        value(below.aGx[i], below.bGx[i]) * gx[k - stride] ** 2 * wall("bottom", cellRow === 0) +
        value(here.aGx[i], here.bGx[i]) * gx[k] ** 2 * wall("top", cellRow === lattice.ny - 1);
      const gyPart =
        value(here.aGy[i - 1], here.bGy[i - 1]) * gy[k - 1] ** 2 * wall("left", n === 0) +
        value(here.aGy[i], here.bGy[i]) * gy[k] ** 2 * wall("right", n === nx - 1);
      out[n] = area * (fPart + 0.5 * (gxPart + gyPart));
    }
  };
}

function readerOf(engine: Engine, quantity: FieldQuantity): RowReader {
  const { lattice, fields } = engine;
  const centre = new CentreReader(lattice, fields);
  const scratch = new Float64Array(lattice.nx);
  const negated =
    (reader: RowReader): RowReader =>
    (row, out) => {
      reader(row, out);
      for (let i = 0; i < lattice.nx; i += 1) out[i] = -out[i];
    };
  const inPlane: RowReader = (row, out) => {
    centre.gx(row, out);
    centre.gy(row, scratch);
    for (let i = 0; i < lattice.nx; i += 1) out[i] = Math.sqrt(out[i] * out[i] + scratch[i] * scratch[i]);
  };
  const outOfPlane: RowReader = (row, out) => {
    centre.f(row, out);
    for (let i = 0; i < lattice.nx; i += 1) out[i] = Math.abs(out[i]);
  };
  const isTmz = lattice.polarization === "TMz";
  switch (quantity) {
    case "Ez":
    case "Hz":
      return centre.f;
    case "Hx":
      return centre.gx;
    case "Hy":
      return centre.gy;
    case "Ex":
      return negated(centre.gx);
    case "Ey":
      return negated(centre.gy);
    case "absE":
      return isTmz ? outOfPlane : inPlane;
    case "absH":
      return isTmz ? inPlane : outOfPlane;
    case "energyDensity":
      return new DensityReader(engine, (a, b) => halfStorage(a, b, lattice.dt)).read;
    case "lossDensity":
      return new DensityReader(engine, lossOf).read;
  }
}

/** Adds `scale` × a row of `from.length` values to `to`, each target cell the mean of the sources it covers, by length. */
function addResampled(from: Float64Array, to: Float64Array, width: number, scale: number): void {
  const source = from.length;
  if (source === width) {
    for (let i = 0; i < width; i += 1) to[i] += scale * from[i];
    return;
  }
  const ratio = source / width;
  for (let target = 0; target < width; target += 1) {
    const start = target * ratio;
    const end = Math.min(source, start + ratio);
    let cell = Math.floor(start);
    let sum = from[cell] * (Math.min(end, cell + 1) - start);
    for (cell += 1; cell + 1 <= end; cell += 1) sum += from[cell];
    if (cell < end && cell < source) sum += from[cell] * (end - cell);
    to[target] += (scale * sum) / ratio;
  }
}

/** Throws a RangeError for a quantity that the polarization does not have or a size below one sample. */
export function sampleQuantity(engine: Engine, request: ViewRequest): FieldSample {
  const { lattice } = engine;
  const { quantity } = request;
  if (!quantitiesOf(lattice.polarization).includes(quantity)) {
    throw new RangeError(`${lattice.polarization} has no ${quantity}.`);
  }
  const width = Math.min(lattice.nx, Math.floor(request.width));
  const height = Math.min(lattice.ny, Math.floor(request.height));
  if (!(width >= 1 && height >= 1)) {
    throw new RangeError(
      `A view of ${request.width} × ${request.height} samples was asked for; it needs at least 1 × 1.`,
    );
  }
  const reader = readerOf(engine, quantity);
  const values = new Float32Array(width * height);
  const cells = new Float64Array(lattice.nx);
  const sums = new Float64Array(width);
  const ratio = lattice.ny / height;
  let lastRead = -1;
  for (let target = 0; target < height; target += 1) {
    const start = target * ratio;
    const end = Math.min(lattice.ny, start + ratio);
    sums.fill(0);
    for (let row = Math.floor(start); row < end; row += 1) {
      const share = Math.min(end, row + 1) - Math.max(start, row);
      if (share < 1e-9) continue;
      if (row !== lastRead) reader(row, cells);
      lastRead = row;
      addResampled(cells, sums, width, share / ratio);
    }
    values.set(sums, target * width);
  }
  return { quantity, width, height, values, step: engine.step, timeNs: engine.step * lattice.dt * 1e9 };
}
