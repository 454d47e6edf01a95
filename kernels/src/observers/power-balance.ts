/**
 * Where the power goes: what drives put in, what media absorb, what leaves through the absorbing edges, each from its own fields.
 *
 * In the lattice the books are exact. With V the phasor of a field at its own times and C = cos(ωΔt/2), the mean of two neighbouring
 * samples is C·V at the time of the step's differences; each step's equation times that mean gives
 *
 *   ½·loss·C²·|V|² = ½·C·Re V*·(differences of the other fields) − ½·C·Re V*·(weight·S of its drives),
 *
 * and what a difference takes from F at one end of a link it gives to G on it and F at the other end. So of all differences in the
 * section only the links to the absorbing layers are left: ½·C·Re F*·G there is what leaves. What poles and films absorb is told by
 * `Dissipation`.
 */
import type { Lattice } from "../lattice/index.js";
import { firstColumn, firstRow, sectionColumns, sectionRows } from "../lattice/index.js";
import { lossOf } from "../media/index.js";
import type { DrivePoint, Engine, EngineField } from "../stepping/index.js";
import { rowCoefficients } from "../stepping/index.js";
import type { LossyMedia, PointPowers } from "./dissipation.js";
import { Dissipation } from "./dissipation.js";
import { concat, FrameTransform } from "./frame-transform.js";

interface BalanceSpec {
  media: LossyMedia;
  drives: readonly DrivePoint[];
  /** Signals of a step. */
  signals: number;
  frequenciesHz: readonly number[];
  /** Steps between two frames. */
  every: number;
}

/** At each frequency, in W/m per |∫…dt|² of what drives. */
interface BalanceFigures {
  input: Float64Array;
  absorbed: Float64Array;
  leaving: Float64Array;
}

const FIELDS: readonly EngineField[] = ["f", "gx", "gy"];

/** Rows and columns of a field that belong to the section, both ends counted; links to absorbing layers do not. */
function rangesOf(lattice: Lattice, field: EngineField): [number, number, number, number] {
  const left = firstColumn(lattice);
  const right = left + sectionColumns(lattice) - 1;
  const bottom = firstRow(lattice);
  const top = bottom + sectionRows(lattice) - 1;
  const absorbs = (edge: "left" | "right" | "bottom" | "top"): number =>
    lattice.edges[edge] === "absorbing" ? 1 : 0;
  if (field === "gx") return [left, right, bottom - 1 + absorbs("bottom"), top - absorbs("top")];
  if (field === "gy") return [left - 1 + absorbs("left"), right - absorbs("right"), bottom, top];
  return [left, right, bottom, top];
}

interface LossyPoints {
  indices: number[];
  loss: number[];
}

/** Every point of the section that absorbs, by field. */
function lossyPoints(engine: Engine, beyond: Dissipation): Record<EngineField, LossyPoints> {
  const { lattice } = engine;
  const found = {
    f: { indices: [], loss: [] },
    gx: { indices: [], loss: [] },
    gy: { indices: [], loss: [] },
  } as Record<EngineField, LossyPoints>;
  const row = rowCoefficients(lattice.stride);
  for (let j = 0; j <= lattice.rows; j += 1) {
    engine.readCoefficients(j, row);
    for (const field of FIELDS) {
      const [first, last, low, high] = rangesOf(lattice, field);
      if (j < low || j > high) continue;
      const a = { f: row.aF, gx: row.aGx, gy: row.aGy }[field];
      const b = { f: row.bF, gx: row.bGx, gy: row.bGy }[field];
      for (let i = first; i <= last; i += 1) {
        const loss = lossOf(a[i], b[i]);
        const k = j * lattice.stride + i;
        if (loss === 0 && !beyond.acts(field, k)) continue;
        found[field].indices.push(k);
        found[field].loss.push(loss);
      }
    }
  }
  return found;
}

interface Link {
  f: number;
  field: "gx" | "gy";
  g: number;
  /** Of ½·C·Re F*·G, outward. */
  sign: 1 | -1;
}

function linksOf(lattice: Lattice): Link[] {
  const { stride, edges } = lattice;
  const [left, right, bottom, top] = rangesOf(lattice, "f");
  const links: Link[] = [];
  for (let j = bottom; j <= top; j += 1) {
    const [l, r] = [j * stride + left, j * stride + right];
    if (edges.left === "absorbing") links.push({ f: l, field: "gy", g: l - 1, sign: 1 });
    if (edges.right === "absorbing") links.push({ f: r, field: "gy", g: r, sign: -1 });
  }
  for (let i = left; i <= right; i += 1) {
    const [b, t] = [bottom * stride + i, top * stride + i];
    if (edges.bottom === "absorbing") links.push({ f: b, field: "gx", g: b - stride, sign: -1 });
    if (edges.top === "absorbing") links.push({ f: t, field: "gx", g: t, sign: 1 });
  }
  return links;
}

/** Numbers that the balance of this section keeps for each frequency. */
export function balanceSums(
  engine: Engine,
  media: LossyMedia,
  drives: readonly DrivePoint[],
  signals: number,
): number {
  const lossy = lossyPoints(engine, new Dissipation(engine, media));
  const points = FIELDS.reduce((sum, field) => sum + lossy[field].indices.length, 0);
  return 2 * (points + 2 * linksOf(engine.lattice).length + drives.length + signals);
}

export class PowerBalance {
  private readonly lattice: Lattice;
  private readonly lossy: Record<EngineField, LossyPoints>;
  private readonly beyond: PointPowers;
  private readonly links: readonly Link[];
  /** Fields of lossy points; F and G of links; fields of drives. */
  private readonly absorbing: FrameTransform;
  private readonly crossing: FrameTransform;
  private readonly driven: FrameTransform;
  private readonly drives: readonly DrivePoint[];
  private readonly signalRe: Float64Array;
  private readonly signalIm: Float64Array;

  constructor(
    engine: Engine,
    private readonly spec: BalanceSpec,
  ) {
    const { frequenciesHz, every, signals } = spec;
    this.lattice = engine.lattice;
    const { dt, stride } = this.lattice;
    const transform = (groups: readonly (readonly [EngineField, readonly number[]])[]): FrameTransform =>
      new FrameTransform(
        groups.map(([field, indices]) => ({ field, indices: Int32Array.from(indices) })),
        frequenciesHz,
        dt,
        every,
      );
    const beyond = new Dissipation(engine, spec.media);
    this.lossy = lossyPoints(engine, beyond);
    this.beyond = beyond.of(
      FIELDS.map((field) => ({ field, indices: Int32Array.from(this.lossy[field].indices) })),
    );
    this.absorbing = transform(FIELDS.map((field) => [field, this.lossy[field].indices]));
    const links = linksOf(this.lattice);
    this.links = [
      ...links.filter(({ field }) => field === "gx"),
      ...links.filter(({ field }) => field === "gy"),
    ];
    const across = (field: "gx" | "gy"): number[] =>
      this.links.filter((link) => link.field === field).map(({ g }) => g);
    this.crossing = transform([
      ["f", this.links.map(({ f }) => f)],
      ["gx", across("gx")],
      ["gy", across("gy")],
    ]);
    const fieldOf = ({ field }: DrivePoint): EngineField => field ?? "f";
    this.drives = FIELDS.flatMap((field) => spec.drives.filter((drive) => fieldOf(drive) === field));
    this.driven = transform(
      FIELDS.map((field) => [
        field,
        this.drives
          .filter((drive) => fieldOf(drive) === field)
          .map(({ row, column }) => row * stride + column),
      ]),
    );
    this.signalRe = new Float64Array(signals * frequenciesHz.length);
    this.signalIm = new Float64Array(signals * frequenciesHz.length);
  }

  /**
   * @param step steps since time 0
   * @param signals those of the last step, from `offset` on
   */
  look(engine: Engine, step: number, signals: Float64Array, offset: number): void {
    for (const transform of [this.absorbing, this.crossing, this.driven]) transform.look(engine.fields, step);
    const { frequenciesHz, every, signals: count } = this.spec;
    const { dt } = this.lattice;
    frequenciesHz.forEach((frequency, index) => {
      // As if all of them drove F; what drives G does so half a step earlier.
      const angle = 2 * Math.PI * frequency * (step - 0.5) * dt;
      const c = Math.cos(angle) * dt * every;
      const s = -Math.sin(angle) * dt * every;
      for (let n = 0; n < count; n += 1) {
        this.signalRe[index * count + n] += signals[offset + n] * c;
        this.signalIm[index * count + n] += signals[offset + n] * s;
      }
    });
  }

  figures(): BalanceFigures {
    const { frequenciesHz } = this.spec;
    const of = (figure: (index: number, c: number) => number): Float64Array =>
      Float64Array.from(frequenciesHz, (frequency, index) =>
        figure(index, Math.cos(Math.PI * frequency * this.lattice.dt)),
      );
    return {
      input: of((index, c) => this.inputAt(index, c)),
      absorbed: of((index, c) => this.absorbedAt(index, c) + this.beyondAt(index)),
      leaving: of((index, c) => this.leavingAt(index, c)),
    };
  }

  private absorbedAt(index: number, c: number): number {
    const { re, im, points } = this.absorbing;
    let at = index * points;
    let sum = 0;
    for (const field of FIELDS) {
      for (const loss of this.lossy[field].loss) {
        sum += loss * (re[at] ** 2 + im[at] ** 2);
        at += 1;
      }
    }
    return (c * c * sum) / 2;
  }

  private beyondAt(index: number): number {
    const { re, im, points } = this.absorbing;
    const omegaDt = 2 * Math.PI * this.spec.frequenciesHz[index] * this.lattice.dt;
    const { f, g } = this.beyond.at(re, im, index * points, omegaDt);
    return f + g;
  }

  private leavingAt(index: number, c: number): number {
    const { re, im, points } = this.crossing;
    const base = index * points;
    const count = this.links.length;
    let sum = 0;
    for (let n = 0; n < count; n += 1) {
      const [f, g] = [base + n, base + count + n];
      sum += this.links[n].sign * (re[f] * re[g] + im[f] * im[g]);
    }
    return (c * sum) / 2;
  }

  private inputAt(index: number, c: number): number {
    const { re, im, points } = this.driven;
    const { signals, frequenciesHz } = this.spec;
    const half = Math.PI * frequenciesHz[index] * this.lattice.dt;
    const [turnRe, turnIm] = [Math.cos(half), Math.sin(half)];
    let sum = 0;
    this.drives.forEach(({ field, weight, signal }, n) => {
      const at = index * points + n;
      const s = index * signals + signal;
      const onF = field === undefined || field === "f";
      const signalRe = onF ? this.signalRe[s] : this.signalRe[s] * turnRe - this.signalIm[s] * turnIm;
      const signalIm = onF ? this.signalIm[s] : this.signalIm[s] * turnRe + this.signalRe[s] * turnIm;
      sum -= weight * (re[at] * signalRe + im[at] * signalIm);
    });
    return (c * sum) / 2;
  }

  save(): Float64Array {
    const parts = [
      this.absorbing.save(),
      this.crossing.save(),
      this.driven.save(),
      this.signalRe,
      this.signalIm,
    ];
    return concat(parts);
  }

  load(packed: Float64Array): void {
    let at = 0;
    for (const transform of [this.absorbing, this.crossing, this.driven]) {
      transform.load(packed.subarray(at, at + transform.size));
      at += transform.size;
    }
    for (const sums of [this.signalRe, this.signalIm]) {
      sums.set(packed.subarray(at, at + sums.length));
      at += sums.length;
    }
  }
}
