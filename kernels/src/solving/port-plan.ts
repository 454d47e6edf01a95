/** A scene's ports compiled for an engine, and which of them a run drives. */
import { compileWaveform } from "../drives/index.js";
import type { Lattice } from "../lattice/index.js";
import type { PortMode } from "../ports/index.js";
import {
  drivingGain,
  GuideLine,
  guidePhase,
  LATER_STEPS,
  latticeCutoff,
  portDrivePoints,
  portMode,
} from "../ports/index.js";
import type { ResolvedScene, Waveform } from "../scene/index.js";
import { canonicalJson, defaultWaveform, SceneError } from "../scene/index.js";
import type { CoefficientSource } from "../stepping/index.js";
import type { DrivePlan } from "./plan.js";

export interface PortPlan {
  modes: readonly PortMode[];
  /** Index of the port that the run drives. */
  driven: number;
}

/** Throws a SceneError where the mesh has too few points across a guide for its mode. */
export const portModesOf = (
  scene: ResolvedScene,
  lattice: Lattice,
  coefficients: CoefficientSource,
): PortMode[] =>
  scene.ports.map((port, index) => {
    try {
      return portMode(lattice, coefficients, port);
    } catch (error) {
      if (!(error instanceof RangeError)) throw error;
      throw new SceneError([{ path: `ports[${index}]`, sentence: error.message }]);
    }
  });

/** The amplitude that makes 1 W/m at the band's middle, or the first frequency above it that the guide carries; 1 where it carries none. */
function unitAmplitude(scene: ResolvedScene, lattice: Lattice, mode: PortMode): number {
  const { fromGHz, toGHz } = scene.band;
  for (let share = 0.5; share <= 1; share += 1 / 64) {
    const hz = (fromGHz + share * (toGHz - fromGHz)) * 1e9;
    const phase = guidePhase(lattice, mode, hz);
    if (phase) return 1 / (phase.root * drivingGain(mode, lattice.dt, hz));
  }
  return 1;
}

/** Up to this many times its cut-off a mode is too slow for a run to wait for. */
export const NEAR_CUTOFF = 1.1;
/** Level at the band's lower end over the largest in the band: 20 dB. */
const LOWER_END = 0.1;
const WIDENINGS = 40;

/**
 * The pulse of a port's guide line (see there for what the line makes of it), within 20 dB of its peak over the band from 1.1 times the
 * cut-off on, as sent into the guide. It is made wider downward until the lower end is high enough.
 */
function portPulse({ band }: ResolvedScene, lattice: Lattice, mode: PortMode): Waveform {
  const cutoff = latticeCutoff(lattice, mode) / 1e9;
  const { fromGHz, toGHz } = band;
  const from = Math.max(fromGHz, NEAR_CUTOFF * cutoff);
  if (from >= toGHz || drivingGain(mode, lattice.dt, 0) === 1) return defaultWaveform(band);
  const lowerEndIsHighEnough = (half: number): boolean => {
    const level = (f: number): number =>
      10 ** -(((f - toGHz + half) / half) ** 2) * drivingGain(mode, lattice.dt, f * 1e9);
    const inBand = Array.from({ length: 33 }, (_, n) => level(from + ((toGHz - from) * n) / 32));
    return inBand[0] >= LOWER_END * Math.max(...inBand);
  };
  const widest = toGHz / 2;
  let half = (toGHz - from) / 2;
  for (let n = 0; n < WIDENINGS && half < widest && !lowerEndIsHighEnough(half); n += 1)
    half = Math.min(widest, half * 1.05);
  return { kind: "pulse", centerGHz: toGHz - half, widthGHz: 2 * half };
}

/** The drive of one port by a pulse over the band. */
export function portDrives(scene: ResolvedScene, lattice: Lattice, { modes, driven }: PortPlan): DrivePlan {
  const mode = modes[driven];
  const pulse = portPulse(scene, lattice, mode);
  const waveform = compileWaveform(pulse);
  const amplitude = unitAmplitude(scene, lattice, mode);
  const generator = new GuideLine(lattice, mode, scene.band.fromGHz * 1e9, waveform, amplitude);
  return {
    sources: [
      {
        id: mode.id,
        waveform,
        waveformText: canonicalJson(pulse),
        offset: 0,
        endSeconds: waveform.endSeconds + LATER_STEPS * lattice.dt,
        text: canonicalJson(scene.ports[driven]),
        generator,
      },
    ],
    points: portDrivePoints(mode, 0),
    signals: generator.signals,
    endSeconds: waveform.endSeconds + LATER_STEPS * lattice.dt,
    firstStep: 0,
  };
}
