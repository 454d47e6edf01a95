/** A scene's ports compiled for an engine, and which of them a run drives. */
import { compileWaveform } from "../drives/index.js";
import type { Lattice } from "../lattice/index.js";
import type { PortMode } from "../ports/index.js";
import { GuideLine, guidePhase, portDrivePoints, portMode } from "../ports/index.js";
import type { ResolvedScene } from "../scene/index.js";
import { canonicalJson, defaultWaveform } from "../scene/index.js";
import type { CoefficientSource } from "../stepping/index.js";
import type { DrivePlan } from "./plan.js";

export interface PortPlan {
  modes: readonly PortMode[];
  /** Index of the port that the run drives. */
  driven: number;
}

/** Throws a RangeError where a line has too few points for its mode. */
export const portModesOf = (
  scene: ResolvedScene,
  lattice: Lattice,
  coefficients: CoefficientSource,
): PortMode[] => scene.ports.map((port) => portMode(lattice, coefficients, port));

/** ψ of 1 W/m at the band's middle, or the first frequency above it that the guide carries; 1 where it carries none. */
function unitAmplitude(scene: ResolvedScene, lattice: Lattice, mode: PortMode): number {
  const { fromGHz, toGHz } = scene.band;
  for (let share = 0.5; share <= 1; share += 1 / 64) {
    const phase = guidePhase(lattice, mode, (fromGHz + share * (toGHz - fromGHz)) * 1e9);
    if (phase) return 1 / phase.root;
  }
  return 1;
}

/** The drive of one port by the default pulse of the band. */
export function portDrives(scene: ResolvedScene, lattice: Lattice, { modes, driven }: PortPlan): DrivePlan {
  const mode = modes[driven];
  const pulse = defaultWaveform(scene.band);
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
        endSeconds: waveform.endSeconds,
        text: canonicalJson(scene.ports[driven]),
        generator,
      },
    ],
    points: portDrivePoints(mode, 0),
    signals: generator.signals,
    endSeconds: waveform.endSeconds + lattice.dt,
    firstStep: 0,
  };
}
