/**
 * Complex frequency of one mode of a ring-down, independent of the solver's own analyses: the trace is weighed with two
 * equal windows, the second later by `shift`; a mode exp(jΩt) turns the windowed sums' ratio by exp(jΩ·shift), while modes away from
 * it are suppressed by the window's side lobes (four-term Blackman–Harris, −92 dB; F. J. Harris, Proc. IEEE 66 (1978) 51).
 */
export interface Trace {
  start: number;
  step: number;
  values: readonly number[];
}

export interface RingMode {
  /** Hz. */
  frequency: number;
  /** Infinite or huge where nothing decays. */
  q: number;
}

const WINDOW = [0.35875, -0.48829, 0.14128, -0.01168];

function windowedSum(trace: Trace, first: number, length: number, omega: number): [number, number] {
  let re = 0;
  let im = 0;
  for (let n = 0; n < length; n += 1) {
    const phase = (2 * Math.PI * n) / (length - 1);
    const weight = WINDOW.reduce((sum, term, order) => sum + term * Math.cos(order * phase), 0);
    const angle = omega * (trace.start + (first + n) * trace.step);
    re += weight * trace.values[first + n] * Math.cos(angle);
    im -= weight * trace.values[first + n] * Math.sin(angle);
  }
  return [re, im];
}

/**
 * @param from seconds after which nothing drives any more
 * @param window length of each window in seconds: several over the distance to the next mode in Hz
 * @param guess Hz, within a fraction of 1/window
 */
export function ringMode(trace: Trace, from: number, window: number, guess: number): RingMode {
  const first = Math.ceil((from - trace.start) / trace.step);
  const length = Math.floor(window / trace.step);
  const shift = Math.max(1, Math.round(length / 16));
  if (first + length + shift > trace.values.length)
    throw new Error("The trace is too short for the windows.");
  let frequency = guess;
  let decay = 0;
  for (let pass = 0; pass < 8; pass += 1) {
    const omega = 2 * Math.PI * frequency;
    const [ar, ai] = windowedSum(trace, first, length, omega);
    const [br, bi] = windowedSum(trace, first + shift, length, omega);
    // b/a = exp(j(Ω − ω)·shift·Δt), the fixed phase reference cancels.
    const re = br * ar + bi * ai;
    const im = bi * ar - br * ai;
    const time = shift * trace.step;
    frequency += Math.atan2(im, re) / (2 * Math.PI * time);
    decay = -Math.log(Math.hypot(br, bi) / Math.hypot(ar, ai)) / time;
  }
  return { frequency, q: (Math.PI * frequency) / decay };
}
