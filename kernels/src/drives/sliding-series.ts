/** A series of numbers by index of which only a window is kept, computed as it is asked for. */
export class SlidingSeries {
  private values = new Float64Array(0);
  private first = 0;
  private end = 0;

  /** @param compute writes the numbers from, … , from + out.length − 1 */
  constructor(private readonly compute: (from: number, out: Float64Array) => void) {}

  /**
   * The numbers from … to − 1 as a view that the next call outdates. What lies before `from` is forgotten, so that windows that move
   * on cost their new numbers alone.
   */
  window(from: number, to: number): Float64Array {
    if (from < this.first || from > this.end) {
      this.first = from;
      this.end = from;
    }
    const kept = Math.max(0, this.end - from);
    const length = to - from;
    if (this.values.length < length) {
      const grown = new Float64Array(2 * length);
      grown.set(this.values.subarray(from - this.first, this.end - this.first));
      this.values = grown;
    } else this.values.copyWithin(0, from - this.first, this.end - this.first);
    this.first = from;
    if (length > kept) this.compute(this.end, this.values.subarray(kept, length));
    this.end = from + Math.max(length, kept);
    return this.values.subarray(0, length);
  }
}
