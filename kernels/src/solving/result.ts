/** The result document of a run: one leg, or several in turn that are merged. */
import type { ProbeResult, Resonance, SolveResult } from "../scene/index.js";
import { balanceInDocument, judgeShares } from "./balance.js";
import type { LegRecord } from "./leg-record.js";
import { judgeLines } from "./limits.js";
import { legWaves, portsInDocument, sentWave } from "./port-results.js";
import { qualityOf } from "./quality.js";
import { judgeQ, resonancesInDocument } from "./resonances.js";
import type { StopReason } from "./session.js";
import type { SpectrumInput } from "./spectra.js";
import { spectraOf } from "./spectra.js";
import { SOLVER_VERSION } from "./version.js";

/** What one leg adds to the document. */
interface LegPart {
  results: ProbeResult[];
  resonances: Resonance[] | undefined;
  waves: ReturnType<typeof legWaves>;
  balance: NonNullable<SolveResult["balance"]> | null;
  unfinished: ReadonlySet<string>;
  warnings: string[];
}

function partOf(record: LegRecord, edited: boolean): LegPart {
  const { dt } = record.lattice;
  const waves = edited ? null : legWaves(record);
  const drive = record.ports?.modes[record.ports.driven].id ?? null;
  const driven: SpectrumInput = {
    probes: record.probes,
    frames: record.frames,
    drives: record.drives,
    traces: record.traces,
    dt,
    steps: record.steps,
    frequenciesGHz: record.frequenciesGHz,
    band: record.resolved.band,
    sent: waves && sentWave(waves, record.frequenciesGHz.length),
  };
  const spectra = edited ? null : spectraOf(driven);
  const spectrumOf = (index: number): ProbeResult["spectrum"] => {
    const spectrum = spectra?.spectra[index] ?? null;
    return spectrum && spectra?.unfinished.has(record.probes[index].id)
      ? { ...spectrum, unfinished: true }
      : spectrum;
  };
  const results = record.probes.map(
    (probe, index): ProbeResult => ({
      id: probe.id,
      drive,
      kind: probe.kind,
      quantity: probe.quantity,
      unit: probe.unit,
      trace: {
        startNs: (record.drives.firstStep + probe.firstSampleStep) * dt * 1e9,
        stepNs: probe.every * dt * 1e9,
        values: Array.from(record.traces(index)),
      },
      spectrum: spectrumOf(index),
    }),
  );
  return {
    results,
    resonances: edited ? undefined : resonancesInDocument(driven, record.resolved),
    waves,
    balance: spectra ? balanceInDocument(driven) : null,
    unfinished: spectra?.unfinished ?? new Set(),
    warnings: [...record.warnings, ...(waves?.warnings ?? []), ...(spectra?.warnings ?? [])],
  };
}

const REASONS: readonly StopReason[] = ["decay", "time", "cancelled"];
/** A run has ended as the least finished of its legs did. */
const reasonOf = (records: readonly LegRecord[]): StopReason =>
  records.reduce<StopReason>(
    (worst, { reason }) => (REASONS.indexOf(reason) > REASONS.indexOf(worst) ? reason : worst),
    "decay",
  );

const decayOf = ({ energy, energyMax }: LegRecord): number | null =>
  energyMax > 0 && energy > 0 ? -10 * Math.log10(energy / energyMax) : null;

const sum = (records: readonly LegRecord[], of: (record: LegRecord) => number): number =>
  records.reduce((total, record) => total + of(record), 0);

/** @param records one or more, in the order in which they ran, of one scene and grid */
export function buildResult(records: readonly LegRecord[]): SolveResult {
  const first = records[0];
  const { grid, engine } = first;
  const edits = records.flatMap((record) => record.edits);
  const edited = edits.length > 0;
  const parts = records.map((record) => partOf(record, edited));
  const results = parts.flatMap((part) => part.results);
  // Resonances belong to the section, whichever port excites them: the first leg tells them.
  const { resonances } = parts[0];
  const balance = parts[0].balance ?? undefined;
  const ports = portsInDocument(
    records,
    parts.map(({ waves }) => waves),
  );
  const unfinished = new Set(parts.flatMap((part) => [...part.unfinished]));
  const limits = edited
    ? []
    : [
        ...judgeLines(first.resolved, {
          results,
          unfinished,
          ports,
          portsUnfinished: parts.some(({ waves }) => waves?.unfinished ?? false),
        }),
        ...judgeQ(first.resolved, resonances),
        ...judgeShares(first.resolved, results, balance, unfinished),
      ];
  const warnings = [...new Set(parts.flatMap((part) => part.warnings))];
  if (edited) {
    warnings.push(
      "The scene was edited while it ran: there are traces and fields but no spectra and no limits. Run the edited scene cleanly.",
    );
  }
  // Of several legs, the one with the most energy left tells how far the run may be trusted.
  const loudest = records.reduce((worst, record) =>
    (decayOf(record) ?? Infinity) < (decayOf(worst) ?? Infinity) ? record : worst,
  );
  const seconds = sum(records, (record) => record.seconds);
  return {
    format: "heddle-result",
    version: 1,
    scene: { name: first.scene.name, sha256: first.sceneSha256 },
    solver: { version: SOLVER_VERSION, engine: engine.name, precision: engine.precision },
    grid: {
      nx: grid.nx,
      ny: grid.ny,
      dxMm: grid.dxMm,
      dyMm: grid.dyMm,
      stepPs: grid.stepPs,
      steps: sum(records, ({ steps }) => steps),
      courant: grid.courant,
    },
    stopped: { reason: reasonOf(records), decayDb: decayOf(loudest) },
    probes: results,
    ...(ports ? { ports } : {}),
    ...(resonances ? { resonances } : {}),
    ...(balance ? { balance } : {}),
    ...(limits.length > 0 ? { limits } : {}),
    quality: qualityOf({ ...loudest, warnings }),
    ...(edited ? { edits } : {}),
    timing: {
      seconds,
      cellStepsPerSecond: seconds > 0 ? sum(records, (record) => record.cellSteps) / seconds : 0,
      threads: engine.threads,
    },
  };
}
