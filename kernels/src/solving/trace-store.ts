/** The recorded samples of every probe, one growing array each. */
export class TraceStore {
  private buffers: Float64Array[];
  private count = 0;

  constructor(
    private readonly probes: number,
    private readonly maxSamples: number,
  ) {
    const initial = Math.min(maxSamples, 4096);
    this.buffers = Array.from({ length: probes }, () => new Float64Array(initial));
  }

  get length(): number {
    return this.count;
  }

  /** Takes `steps` samples of all probes, step-major as the engine writes them. */
  append(records: Float64Array, steps: number): void {
    this.reserve(this.count + steps);
    for (let probe = 0; probe < this.probes; probe += 1) {
      const buffer = this.buffers[probe];
      for (let t = 0; t < steps; t += 1) buffer[this.count + t] = records[t * this.probes + probe];
    }
    this.count += steps;
  }

  /** Samples from index `from` on; a view that the next append may outdate. */
  since(probe: number, from: number): Float64Array {
    return this.buffers[probe].subarray(Math.min(from, this.count), this.count);
  }

  /** All samples, probe after probe. */
  save(): Float64Array {
    const all = new Float64Array(this.probes * this.count);
    this.buffers.forEach((buffer, probe) => {
      all.set(buffer.subarray(0, this.count), probe * this.count);
    });
    return all;
  }

  load(all: Float64Array, count: number): void {
    this.count = 0;
    this.reserve(count);
    this.buffers.forEach((buffer, probe) => {
      buffer.set(all.subarray(probe * count, (probe + 1) * count));
    });
    this.count = count;
  }

  private reserve(samples: number): void {
    const first = this.buffers.at(0);
    if (!first || first.length >= samples) return;
    const size = Math.min(Math.max(samples, this.maxSamples), Math.max(samples, first.length * 2));
    this.buffers = this.buffers.map((buffer) => {
      const grown = new Float64Array(size);
      grown.set(buffer.subarray(0, this.count));
      return grown;
    });
  }
}
