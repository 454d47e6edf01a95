/**
 * The engine's memory: blocks are taken from the end of a growing shared memory and given back by size. Views are made anew when
 * it grows; views that were handed out stay valid, for shared memory never moves.
 */
import { platform } from "./web-assembly.js";
import type { SharedMemory } from "./web-assembly.js";

const PAGE = 65_536;
/** All that 32-bit addresses reach. */
const MOST_PAGES = 65_536;
const GROW_PAGES = 16;

export class Arena {
  readonly memory: SharedMemory;
  i32: Int32Array<SharedArrayBuffer>;
  f32: Float32Array<SharedArrayBuffer>;
  f64: Float64Array<SharedArrayBuffer>;
  private end: number;
  private readonly free = new Map<number, number[]>();

  /** @param from first free byte; @param bytes that will surely be needed */
  constructor(from: number, bytes: number) {
    if (!platform) throw new RangeError("This platform has no WebAssembly.");
    const initial = Math.ceil((from + bytes) / PAGE);
    if (initial > MOST_PAGES) {
      throw new RangeError(
        `The fields need ${((from + bytes) / 2 ** 30).toFixed(1)} GiB, more than the 4 GiB of the wasm engine; use larger cells or the reference engine.`,
      );
    }
    this.memory = new platform.Memory({ initial, maximum: MOST_PAGES, shared: true });
    this.end = from;
    this.i32 = new Int32Array(this.memory.buffer);
    this.f32 = new Float32Array(this.memory.buffer);
    this.f64 = new Float64Array(this.memory.buffer);
  }

  /** Bytes taken so far. */
  get used(): number {
    return this.end;
  }

  /** Zeroed bytes at the end, on a multiple of `alignment`. They are never given back. */
  reserve(bytes: number, alignment: number): number {
    const address = Math.ceil(this.end / alignment) * alignment;
    this.end = address + bytes;
    this.ensure();
    return address;
  }

  /** A block of at least `bytes` (see `sizeOf`), on a multiple of 16; what it held before is not cleared. */
  take(bytes: number): number {
    const size = Arena.sizeOf(bytes);
    return this.free.get(size)?.pop() ?? this.reserve(size, 16);
  }

  /** Gives a block back that `take(bytes)` gave. */
  release(address: number, bytes: number): void {
    const size = Arena.sizeOf(bytes);
    const list = this.free.get(size);
    if (list) list.push(address);
    else this.free.set(size, [address]);
  }

  /** What `take` really takes: sizes a sixteenth apart, so that a block given back serves again. */
  static sizeOf(bytes: number): number {
    const step = 2 ** Math.max(6, Math.floor(Math.log2(Math.max(bytes, 1))) - 4);
    return Math.ceil(bytes / step) * step;
  }

  private ensure(): void {
    const have = this.memory.buffer.byteLength;
    if (this.end <= have) return;
    const pages = Math.max(GROW_PAGES, Math.ceil((this.end - have) / PAGE));
    try {
      this.memory.grow(Math.min(pages, MOST_PAGES - have / PAGE));
    } catch (error) {
      throw new RangeError(
        `The section needs more than the ${(have / 2 ** 20).toFixed(0)} MiB of memory that could be had; use larger cells or a smaller section.`,
        { cause: error },
      );
    }
    if (this.end > this.memory.buffer.byteLength) {
      throw new RangeError(
        "The section needs more than the 4 GiB that the wasm engine reaches; use larger cells.",
      );
    }
    this.i32 = new Int32Array(this.memory.buffer);
    this.f32 = new Float32Array(this.memory.buffer);
    this.f64 = new Float64Array(this.memory.buffer);
  }
}
