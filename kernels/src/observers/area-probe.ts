/**
 * Absorbed power or stored energy in a rectangle: at the instants of frames, and as averages over frequency.
 *
 * A loss acts on the mean of a field's two neighbouring samples (see `media`), which is cos(ωΔt/2) of it: so the average power is
 * ½·loss·cos²(ωΔt/2)·|V|² and the average energy ½·(½M)·|V|², exactly in the lattice. What poles and films absorb is in the averages (see
 * `Dissipation`); the instants count σ and σ* (and a film's share of its points) alone.
 */
import type { Lattice } from "../lattice/index.js";
import type { Engine, EngineFields } from "../stepping/index.js";
import type { AreaBox, AreaPoints } from "./area-points.js";
import { areaPoints, isElectric, pointsWhere } from "./area-points.js";
import type { LossyMedia, PointPowers } from "./dissipation.js";
import { Dissipation } from "./dissipation.js";
import { concat, FrameTransform } from "./frame-transform.js";

export type AreaQuantity = "absorbed" | "energy";

export interface AreaSpec {
  box: AreaBox;
  media: LossyMedia;
  quantity: AreaQuantity;
  frequenciesHz: readonly number[];
  /** Steps between two frames. */
  every: number;
}

/** At each frequency, per |∫…dt|² of what drives: powers in W/m or energies in J/m, fields in V/m. */
interface AreaFigures {
  electric: Float64Array;
  magnetic: Float64Array;
  /** Mean and largest |E|, to be divided by the drive's own transform. */
  meanField: Float64Array;
  worstField: Float64Array;
}

/** Numbers that a probe of such a rectangle keeps for each frequency. */
export const sumsOf = (
  engine: Engine,
  { box, quantity, media }: Pick<AreaSpec, "box" | "quantity" | "media">,
): number =>
  2 *
  wantedPoints(engine, box, quantity, new Dissipation(engine, media)).reduce(
    (sum, { indices }) => sum + indices.length,
    0,
  );

/** E everywhere for the fields; beyond it what absorbs, or everything that stores. */
const wantedPoints = (
  engine: Engine,
  box: AreaBox,
  quantity: AreaQuantity,
  beyond: Dissipation,
): AreaPoints[] =>
  areaPoints(engine, box).map((points) =>
    quantity === "energy" || isElectric(engine.lattice, points.field)
      ? points
      : pointsWhere(points, (n) => points.loss[n] > 0 || beyond.acts(points.field, points.indices[n])),
  );

/** Middles of TEz's cells with the numbers of the up to four edges about each whose E is known; −1 where it is not. */
interface Cells {
  shares: Float64Array;
  neighbours: Int32Array;
}

function cellsOf(engine: Engine, box: AreaBox, points: readonly AreaPoints[]): Cells {
  const [f, gx, gy] = points;
  const numbers = (of: AreaPoints, offset: number): Map<number, number> =>
    new Map(Array.from(of.indices, (k, n) => [k, offset + n]));
  const alongX = numbers(gx, f.indices.length);
  const alongY = numbers(gy, f.indices.length + gx.indices.length);
  const [middles] = areaPoints(engine, box);
  const { stride } = engine.lattice;
  const neighbours = new Int32Array(4 * middles.indices.length);
  middles.indices.forEach((k, n) => {
    const about = [alongX.get(k), alongX.get(k - stride), alongY.get(k), alongY.get(k - 1)];
    about.forEach((at, side) => (neighbours[4 * n + side] = at ?? -1));
  });
  return { shares: middles.shares, neighbours };
}

export class AreaProbe {
  private readonly lattice: Lattice;
  private readonly transform: FrameTransform;
  private readonly points: readonly AreaPoints[];
  private readonly beyond: PointPowers;
  /** All points at which something can be absorbed or stored now: live edits change them. */
  private instant: readonly AreaPoints[];
  private readonly cells: Cells;
  private trace = new Float64Array(1024);
  private count = 0;

  constructor(
    engine: Engine,
    private readonly spec: AreaSpec,
  ) {
    this.lattice = engine.lattice;
    const beyond = new Dissipation(engine, spec.media);
    this.points = wantedPoints(engine, spec.box, spec.quantity, beyond);
    this.beyond = beyond.of(this.points);
    this.instant = areaPoints(engine, spec.box);
    this.cells = cellsOf(engine, spec.box, this.points);
    this.transform = new FrameTransform(this.points, spec.frequenciesHz, engine.lattice.dt, spec.every);
  }

  /** Takes the coefficients of an edited section for the instants that follow. */
  refresh(engine: Engine): void {
    this.instant = areaPoints(engine, this.spec.box);
  }

  /** @param step steps since time 0 */
  look(fields: EngineFields, step: number): void {
    let sum = 0;
    for (const { field, indices, loss, storage } of this.instant) {
      const values = fields[field];
      const weights = this.spec.quantity === "absorbed" ? loss : storage;
      for (let n = 0; n < indices.length; n += 1) sum += weights[n] * values[indices[n]] ** 2;
    }
    if (this.count === this.trace.length) {
      const grown = new Float64Array(2 * this.count);
      grown.set(this.trace);
      this.trace = grown;
    }
    this.trace[this.count] = sum;
    this.count += 1;
    this.transform.look(fields, step);
  }

  /** Values at the frames so far: W/m absorbed, or J/m. */
  get values(): Float64Array {
    return this.trace.subarray(0, this.count);
  }

  figures(): AreaFigures {
    const { frequenciesHz, quantity } = this.spec;
    const count = frequenciesHz.length;
    const figures = {
      electric: new Float64Array(count),
      magnetic: new Float64Array(count),
      meanField: new Float64Array(count),
      worstField: new Float64Array(count),
    };
    frequenciesHz.forEach((frequency, index) => {
      const onMean = quantity === "absorbed" ? Math.cos(Math.PI * frequency * this.lattice.dt) ** 2 : 1;
      let at = index * this.transform.points;
      for (const { field, indices, loss, storage } of this.points) {
        const weights = quantity === "absorbed" ? loss : storage;
        let sum = 0;
        for (let n = 0; n < indices.length; n += 1, at += 1)
          sum += weights[n] * (this.transform.re[at] ** 2 + this.transform.im[at] ** 2);
        figures[isElectric(this.lattice, field) ? "electric" : "magnetic"][index] += (onMean * sum) / 2;
      }
      if (quantity === "absorbed") this.addBeyond(figures, index);
      const [mean, worst] = this.fieldAt(index);
      figures.meanField[index] = mean;
      figures.worstField[index] = worst;
    });
    return figures;
  }

  private addBeyond({ electric, magnetic }: AreaFigures, index: number): void {
    const { re, im, points } = this.transform;
    const omegaDt = 2 * Math.PI * this.spec.frequenciesHz[index] * this.lattice.dt;
    const { f, g } = this.beyond.at(re, im, index * points, omegaDt);
    const onF = isElectric(this.lattice, "f");
    electric[index] += onF ? f : g;
    magnetic[index] += onF ? g : f;
  }

  /** Mean by area and largest magnitude of E at one frequency. */
  private fieldAt(index: number): [number, number] {
    const { polarization, dx, dy } = this.lattice;
    const { re, im, points: count } = this.transform;
    const base = index * count;
    const [f] = this.points;
    let weight = 0;
    let sum = 0;
    let worst = 0;
    const take = (share: number, square: number): void => {
      const size = Math.sqrt(square);
      weight += share;
      sum += share * size;
      worst = Math.max(worst, size);
    };
    if (polarization === "TMz") {
      for (let n = 0; n < f.indices.length; n += 1) take(f.shares[n], re[base + n] ** 2 + im[base + n] ** 2);
    } else {
      const { shares, neighbours } = this.cells;
      const square = (first: number, second: number, length: number): number => {
        const pair = [first, second].filter((at) => at >= 0);
        if (pair.length === 0) return 0;
        const mean = (of: Float64Array): number =>
          pair.reduce((total, at) => total + of[base + at], 0) / pair.length / length;
        return mean(re) ** 2 + mean(im) ** 2;
      };
      for (let n = 0; n < shares.length; n += 1) {
        const [x1, x2, y1, y2] = neighbours.subarray(4 * n, 4 * n + 4);
        take(shares[n], square(x1, x2, dx) + square(y1, y2, dy));
      }
    }
    return [weight > 0 ? sum / weight : 0, worst];
  }

  /** Frames, the trace, the sums. */
  save(): Float64Array {
    return concat([Float64Array.of(this.count), this.values, this.transform.save()]);
  }

  /** Takes what `save` gave from the front of `packed` and returns what follows. */
  load(packed: Float64Array): Float64Array {
    this.count = packed[0];
    this.trace = new Float64Array(Math.max(1024, 2 * this.count));
    this.trace.set(packed.subarray(1, 1 + this.count));
    const end = 1 + this.count + this.transform.size;
    this.transform.load(packed.subarray(1 + this.count, end));
    return packed.subarray(end);
  }
}
