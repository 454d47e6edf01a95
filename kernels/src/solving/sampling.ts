/**
 * Pictures of the field: a quantity on the section's cell centres, averaged by area onto the raster asked for.
 *
 * Components are means of their nearest field points: four nodes or two edges around a centre. Magnitudes and densities are
 * formed at the centres, densities as the energy or loss of the surrounding field points that falls into the cell.
 */
import type { FieldQuantity, FieldSample, ViewRequest } from "../frames/index.js";
import type { Lattice, Side } from "../lattice/index.js";
import { columnShare, firstColumn, firstRow, rowShare } from "../lattice/index.js";
import { halfStorage, lossOf } from "../media/index.js";
import type { Engine, EngineFields, RowCoefficients } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";

export const quantitiesOf = (polarization: "TMz" | "TEz"): readonly FieldQuantity[] =>
  polarization === "TMz"
    ? ["Ez", "Hx", "Hy", "absE", "absH", "energyDensity", "lossDensity"]
    : ["Hz", "Ex", "Ey", "absE", "absH", "energyDensity", "lossDensity"];

/** Writes row `cellRow` (0 … ny − 1) of a quantity at the cell centres. */
export type RowReader = (cellRow: number, out: Float64Array) => void;

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

/** value(a, b)·v² of one row's field points over the share of their cells that lies in the section. */
interface PointRow {
  f: Float64Array;
  gx: Float64Array;
  gy: Float64Array;
}

/** What the field points around each cell hold, by the share of their own cells that lies in it, per cell area. */
class DensityReader {
  private readonly rows = new Map<number, PointRow>();
  private readonly coefficients: RowCoefficients;
  private readonly shares: Float64Array;

  constructor(
    private readonly engine: Engine,
    private readonly value: PointValue,
  ) {
    const { lattice } = engine;
    this.coefficients = rowCoefficients(lattice.stride);
    this.shares = Float64Array.from({ length: lattice.stride }, (_, i) => columnShare(lattice, i));
  }

  private pointRow(row: number): PointRow {
    const known = this.rows.get(row);
    if (known) return known;
    const { lattice, fields } = this.engine;
    const { coefficients: c, shares, value } = this;
    const { stride, columns } = lattice;
    this.engine.readCoefficients(row, c);
    const made = { f: new Float64Array(stride), gx: new Float64Array(stride), gy: new Float64Array(stride) };
    const share = rowShare(lattice, row);
    const base = row * stride;
    for (let i = 0; i <= columns; i += 1) {
      const f = fields.f[base + i];
      const gx = fields.gx[base + i];
      const gy = fields.gy[base + i];
      made.f[i] = (value(c.aF[i], c.bF[i]) * f * f) / (share * shares[i]);
      made.gx[i] = (value(c.aGx[i], c.bGx[i]) * gx * gx) / shares[i];
      made.gy[i] = (value(c.aGy[i], c.bGy[i]) * gy * gy) / share;
    }
    this.rows.set(row, made);
    this.rows.delete(row - 2);
    return made;
  }

  read: RowReader = (cellRow, out) => {
    const { lattice } = this.engine;
    const { nx, ny, dx, dy } = lattice;
    const left = firstColumn(lattice);
    const row = firstRow(lattice) + cellRow;
    const area = 1 / (dx * dy);
    if (lattice.polarization === "TMz") {
      const lower = this.pointRow(row);
      const upper = this.pointRow(row + 1);
      for (let n = 0, i = left; n < nx; n += 1, i += 1) {
        const fPart = lower.f[i] + lower.f[i + 1] + upper.f[i] + upper.f[i + 1];
        const gPart = lower.gx[i] + lower.gx[i + 1] + lower.gy[i] + upper.gy[i];
        out[n] = area * (0.25 * fPart + 0.5 * gPart);
      }
      return;
    }
    const below = this.pointRow(row - 1);
    const here = this.pointRow(row);
    // G on a magnetic edge has its whole half cell inside.
    const wall = (side: Side, at: boolean): number => (at && lattice.edges[side] === "magnetic" ? 2 : 1);
    const belowWall = wall("bottom", cellRow === 0);
    const aboveWall = wall("top", cellRow === ny - 1);
    for (let n = 0, i = left; n < nx; n += 1, i += 1) {
      const gPart =
        below.gx[i] * belowWall +
        here.gx[i] * aboveWall +
        here.gy[i - 1] * wall("left", n === 0) +
        here.gy[i] * wall("right", n === nx - 1);
      out[n] = area * (here.f[i] + 0.5 * gPart);
    }
  };
}

/** A field quantity of one instant; densities have other readers. */
export function fieldReader(
  lattice: Lattice,
  fields: EngineFields,
  quantity: Exclude<FieldQuantity, "energyDensity" | "lossDensity">,
): RowReader {
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
  }
}

function readerOf(engine: Engine, quantity: FieldQuantity): RowReader {
  const { lattice, fields } = engine;
  if (quantity === "energyDensity")
    return new DensityReader(engine, (a, b) => halfStorage(a, b, lattice.dt)).read;
  if (quantity === "lossDensity") return new DensityReader(engine, lossOf).read;
  return fieldReader(lattice, fields, quantity);
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
  checkQuantity(engine.lattice, request.quantity);
  return resample(engine.lattice, request, readerOf(engine, request.quantity), engine.step);
}

/** Throws a RangeError for a quantity that the polarization does not have. */
export function checkQuantity({ polarization }: Lattice, quantity: FieldQuantity): void {
  if (!quantitiesOf(polarization).includes(quantity))
    throw new RangeError(`${polarization} has no ${quantity}.`);
}

/** What a reader tells of the cells, on the raster asked for. Throws a RangeError for a size below one sample. */
export function resample(
  lattice: Lattice,
  request: ViewRequest,
  reader: RowReader,
  step: number,
): FieldSample {
  const { quantity } = request;
  const width = Math.min(lattice.nx, Math.floor(request.width));
  const height = Math.min(lattice.ny, Math.floor(request.height));
  if (!(width >= 1 && height >= 1)) {
    throw new RangeError(
      `A view of ${request.width} × ${request.height} samples was asked for; it needs at least 1 × 1.`,
    );
  }
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
  return { quantity, width, height, values, step, timeNs: step * lattice.dt * 1e9 };
}
