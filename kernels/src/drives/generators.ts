/** What drives the fields, as numbers step by step: a source writes the signals that its points take. */
import type { CompiledWaveform } from "./waveforms.js";

export interface SignalGenerator {
  /** Signals of a step. */
  readonly signals: number;
  /**
   * Writes the signals of steps first … first + steps − 1 into a step-major array of `width` numbers a step, from `column` on. A source
   * with a state of its own is asked for one step after another, from step 0 or from where `load` put it.
   */
  write(first: number, steps: number, out: Float64Array, width: number, column: number): void;
  /** The state between two steps; empty where there is none. */
  save(): Float64Array;
  /** Throws a RangeError where the state is another source's. */
  load(state: Float64Array): void;
}

/** One signal, amplitude·w((n+½)Δt). */
export function waveformSignals(waveform: CompiledWaveform, amplitude: number, dt: number): SignalGenerator {
  return {
    signals: 1,
    write: (first, steps, out, width, column) => {
      for (let t = 0; t < steps; t += 1)
        out[t * width + column] = amplitude * waveform.valueAt((first + t + 0.5) * dt);
    },
    save: () => new Float64Array(0),
    load: (state) => {
      if (state.length > 0) throw new RangeError("The snapshot has other sources.");
    },
  };
}

/** The states of several generators, one after the other, each after its length. */
export function saveGenerators(generators: readonly SignalGenerator[]): Float64Array {
  return Float64Array.from(
    generators.flatMap((generator) => {
      const state = generator.save();
      return [state.length, ...state];
    }),
  );
}

/** Throws a RangeError where the states are not those of these generators. */
export function loadGenerators(generators: readonly SignalGenerator[], packed: Float64Array): void {
  let offset = 0;
  for (const generator of generators) {
    const length = packed[offset];
    if (!(offset + length < packed.length)) throw new RangeError("The snapshot has other sources.");
    generator.load(packed.slice(offset + 1, offset + 1 + length));
    offset += 1 + length;
  }
  if (offset !== packed.length) throw new RangeError("The snapshot has other sources.");
}
