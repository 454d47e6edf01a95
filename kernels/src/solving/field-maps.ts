/** Whole maps of a run: phasors at chosen frequencies, and the peak envelope. */
import type { EnvelopeRequest, FieldSample, MapRequest } from "../frames/index.js";
import type { Lattice } from "../lattice/index.js";
import { FrameTransform } from "../observers/index.js";
import type { EngineFields } from "../stepping/index.js";
import { checkQuantity, fieldReader, resample } from "./sampling.js";
import type { RowReader } from "./sampling.js";

export interface MapSpec {
  mapsGHz: readonly number[];
  envelope: boolean;
}

/** Maps keep at most so many numbers: 1 GiB. */
const MOST_NUMBERS = 2 ** 27;
/** An envelope looks this often a period of the highest frequency driven: what falls between looks is at most 1.3 % higher. */
export const ENVELOPE_LOOKS = 20;

/** Throws a RangeError where frequencies are none or the maps would take too much memory. */
export class FieldMaps {
  private readonly transform: FrameTransform | null;
  /** Largest |E| and |H| at the cell centres. */
  private readonly peaks: { absE: Float64Array; absH: Float64Array } | null;

  constructor(
    private readonly lattice: Lattice,
    private readonly spec: MapSpec,
    every: number,
  ) {
    const { mapsGHz, envelope } = spec;
    const { size, nx, ny, dt } = lattice;
    if (mapsGHz.some((frequency) => !(frequency > 0 && Number.isFinite(frequency))))
      throw new RangeError("Every frequency of a map must be a positive number of GHz.");
    const numbers = 6 * size * mapsGHz.length + (envelope ? 2 * nx * ny : 0);
    if (numbers > MOST_NUMBERS)
      throw new RangeError(
        `The maps would take ${((8 * numbers) / 2 ** 30).toPrecision(3)} GiB of memory; the maximum is 1 GiB: ask for fewer frequencies.`,
      );
    const indices = Int32Array.from({ length: size }, (_, k) => k);
    const groups = (["f", "gx", "gy"] as const).map((field) => ({ field, indices }));
    const frequenciesHz = mapsGHz.map((frequency) => frequency * 1e9);
    this.transform = mapsGHz.length > 0 ? new FrameTransform(groups, frequenciesHz, dt, every) : null;
    this.peaks = envelope ? { absE: new Float64Array(nx * ny), absH: new Float64Array(nx * ny) } : null;
  }

  /** @param step steps since time 0 */
  look(fields: EngineFields, step: number): void {
    this.transform?.look(fields, step);
    if (!this.peaks) return;
    const { nx, ny } = this.lattice;
    const row = new Float64Array(nx);
    for (const quantity of ["absE", "absH"] as const) {
      const reader = fieldReader(this.lattice, fields, quantity);
      const peaks = this.peaks[quantity];
      for (let j = 0; j < ny; j += 1) {
        reader(j, row);
        for (let i = 0; i < nx; i += 1) peaks[j * nx + i] = Math.max(peaks[j * nx + i], row[i]);
      }
    }
  }

  /**
   * Throws a RangeError where the run keeps no such map.
   *
   * @param divisor the phasor of what drives, which the map is per unit of
   */
  sample(request: MapRequest, divisor: { re: number; im: number }, step: number): FieldSample {
    const index = this.spec.mapsGHz.indexOf(request.GHz);
    if (!this.transform || index < 0) throw new RangeError(`The run keeps no map at ${request.GHz} GHz.`);
    const { quantity, part } = request;
    checkQuantity(this.lattice, quantity);
    const isSize = quantity === "absE" || quantity === "absH";
    if (isSize && part !== "magnitude") throw new RangeError(`${quantity} has no ${part} part.`);
    const { size, nx } = this.lattice;
    const base = index * this.transform.points;
    const partOf = (all: Float64Array): EngineFields => ({
      f: all.subarray(base, base + size),
      gx: all.subarray(base + size, base + 2 * size),
      gy: all.subarray(base + 2 * size, base + 3 * size),
    });
    const real = fieldReader(this.lattice, partOf(this.transform.re), quantity);
    const imaginary = fieldReader(this.lattice, partOf(this.transform.im), quantity);
    const [re, im] = [new Float64Array(nx), new Float64Array(nx)];
    const norm = divisor.re ** 2 + divisor.im ** 2;
    const reader: RowReader = (row, out) => {
      real(row, re);
      imaginary(row, im);
      for (let i = 0; i < nx; i += 1) {
        if (part === "magnitude") out[i] = Math.hypot(re[i], im[i]) / Math.sqrt(norm);
        else if (part === "real") out[i] = (re[i] * divisor.re + im[i] * divisor.im) / norm;
        else out[i] = (im[i] * divisor.re - re[i] * divisor.im) / norm;
      }
    };
    return resample(this.lattice, request, reader, step);
  }

  /** Throws a RangeError where the run keeps no envelope. */
  sampleEnvelope(request: EnvelopeRequest, step: number): FieldSample {
    if (!this.peaks) throw new RangeError("The run keeps no envelope.");
    const { nx } = this.lattice;
    const peaks = this.peaks[request.quantity];
    return resample(
      this.lattice,
      request,
      (row, out) => out.set(peaks.subarray(row * nx, (row + 1) * nx)),
      step,
    );
  }

  save(): Float64Array[] {
    const sums = this.transform ? [this.transform.save()] : [];
    return this.peaks ? [...sums, this.peaks.absE, this.peaks.absH] : sums;
  }

  /** Takes what `save` gave from the front of `packed` and returns what follows. */
  load(packed: Float64Array): Float64Array {
    let at = 0;
    if (this.transform) {
      at = this.transform.size;
      this.transform.load(packed.subarray(0, at));
    }
    for (const peaks of this.peaks ? [this.peaks.absE, this.peaks.absH] : []) {
      peaks.set(packed.subarray(at, at + peaks.length));
      at += peaks.length;
    }
    return packed.subarray(at);
  }
}
