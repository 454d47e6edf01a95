/** Waveforms w(t), peak 1 where they have one, in seconds and hertz. */
import type { Waveform } from "../scene/index.js";

export interface CompiledWaveform {
  /** w at t seconds. */
  valueAt: (t: number) => number;
  /** When it is over; infinite for a tone. */
  endSeconds: number;
  /** Hz; null unless it is a tone. */
  toneHz: number | null;
}

/** Half the length of a pulse over the deviation of its Gaussian: it starts and ends at 2·10⁻⁸ of its peak. */
const PULSE_DEVIATIONS = 6;

/**
 * A Gaussian times a sine carrier, odd about its middle, so that it integrates to zero exactly; scaled to a peak of 1. Its
 * spectrum is exp(−½(2π(f − f₀)s)²) − exp(−½(2π(f + f₀)s)²) with 20 dB less at f₀ ± width/2 where the second term is small:
 * s = √(2 ln 10)/(π·width).
 */
function pulse(centerHz: number, widthHz: number): CompiledWaveform {
  const deviation = Math.sqrt(2 * Math.LN10) / (Math.PI * widthHz);
  const middle = PULSE_DEVIATIONS * deviation;
  const omega = 2 * Math.PI * centerHz;
  const raw = (t: number): number => Math.exp(-0.5 * (t / deviation) ** 2) * Math.sin(omega * t);
  const peak = peakOf(raw, deviation, omega);
  return {
    valueAt: (t) => (t <= 0 || t >= 2 * middle ? 0 : raw(t - middle) / peak),
    endSeconds: 2 * middle,
    toneHz: null,
  };
}

/** The first maximum of g(t)·sin(ωt) after t = 0, where cos(ωt)·ω = sin(ωt)·t/s²; bisected to rounding. */
function peakOf(raw: (t: number) => number, deviation: number, omega: number): number {
  const slope = (t: number): number =>
    omega * Math.cos(omega * t) - (Math.sin(omega * t) * t) / deviation ** 2;
  let low = 0;
  let high = Math.PI / (2 * omega);
  for (let i = 0; i < 80; i += 1) {
    const middle = (low + high) / 2;
    if (slope(middle) > 0) low = middle;
    else high = middle;
  }
  return raw(low);
}

/** A sine that rises over `rampCycles` periods as ½(1 − cos). */
function tone(hz: number, rampCycles: number): CompiledWaveform {
  const ramp = rampCycles / hz;
  return {
    valueAt: (t) => {
      if (t <= 0) return 0;
      const envelope = t >= ramp ? 1 : 0.5 * (1 - Math.cos((Math.PI * t) / ramp));
      return envelope * Math.sin(2 * Math.PI * hz * t);
    },
    endSeconds: Number.POSITIVE_INFINITY,
    toneHz: hz,
  };
}

/** Linear between samples, the first at t = 0, zero before the first and after the last. */
function sampled(step: number, values: readonly number[]): CompiledWaveform {
  const last = values.length - 1;
  return {
    valueAt: (t) => {
      const at = t / step;
      if (at < 0 || at > last) return 0;
      const index = Math.min(last, Math.floor(at));
      const next = values[Math.min(last, index + 1)];
      return values[index] + (next - values[index]) * (at - index);
    },
    endSeconds: last * step,
    toneHz: null,
  };
}

export function compileWaveform(waveform: Waveform): CompiledWaveform {
  switch (waveform.kind) {
    case "pulse":
      return pulse(waveform.centerGHz * 1e9, waveform.widthGHz * 1e9);
    case "tone":
      return tone(waveform.GHz * 1e9, waveform.rampCycles);
    case "samples":
      return sampled(waveform.stepNs * 1e-9, waveform.values);
  }
}
