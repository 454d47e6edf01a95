/** Band, mesh, number of steps: what is refused, and what draws a warning. */
import { cellsPerSkinDepth, cellsPerWavelength, estimateCost, gridOf } from "./grid.js";
import { CELLS_PER_SKIN_DEPTH, CELLS_PER_WAVELENGTH, MAXIMA } from "./limits.js";
import type { Problem, ResolvedScene } from "./schema.js";

export interface Findings {
  problems: Problem[];
  warnings: Problem[];
}

const round = (value: number): string => String(Number(value.toPrecision(3)));

const meshPath = (scene: ResolvedScene): string =>
  "cellMm" in scene.mesh ? "mesh.cellMm" : "mesh.cellsPerWavelength";

/** The remedy in the terms of the mesh that the document gives. */
const remedy = (scene: ResolvedScene, finer: boolean): string => {
  if ("cellMm" in scene.mesh) return finer ? "make cellMm smaller" : "make cellMm larger";
  return finer ? "raise cellsPerWavelength" : "lower cellsPerWavelength";
};

const wavelengths = (scene: ResolvedScene, grid: { dxMm: number; dyMm: number }): Findings => {
  const findings: Findings = { problems: [], warnings: [] };
  const path = meshPath(scene);
  for (const [medium, cells] of Object.entries(cellsPerWavelength(scene, grid))) {
    const said = `The mesh has ${round(cells)} cells per shortest wavelength in "${medium}" at ${String(scene.band.toGHz)} GHz`;
    // Exactly 8 (or 15) asked for must not fail by rounding.
    if (cells < CELLS_PER_WAVELENGTH.refusedBelow * (1 - 1e-9))
      findings.problems.push({
        path,
        sentence: `${said}; at least ${String(CELLS_PER_WAVELENGTH.refusedBelow)} are needed: ${remedy(scene, true)} or lower the band.`,
      });
    else if (cells < CELLS_PER_WAVELENGTH.comfortable * (1 - 1e-9))
      findings.warnings.push({
        path,
        sentence: `${said}; below ${String(CELLS_PER_WAVELENGTH.comfortable)} the waves run visibly slow, so ${remedy(scene, true)} for figures to rely on.`,
      });
  }
  for (const [medium, cells] of cellsPerSkinDepth(scene, grid))
    if (cells < CELLS_PER_SKIN_DEPTH)
      findings.warnings.push({
        path,
        sentence: `"${medium}" has ${round(cells)} cells per skin depth at ${String(scene.band.toGHz)} GHz; under ${String(CELLS_PER_SKIN_DEPTH)} its surface is not resolved, so take its absorption with care.`,
      });
  return findings;
};

const sizes = (scene: ResolvedScene): Findings => {
  const { widthMm, heightMm } = scene.section;
  if (!(widthMm > 0 && heightMm > 0)) return { problems: [], warnings: [] };
  const grid = gridOf(scene);
  const found = wavelengths(scene, grid);
  if (grid.nx > MAXIMA.cellsPerAxis || grid.ny > MAXIMA.cellsPerAxis)
    found.problems.push({
      path: meshPath(scene),
      sentence: `The section would have ${String(grid.nx)} × ${String(grid.ny)} cells; the maximum is ${String(MAXIMA.cellsPerAxis)} along each side: ${remedy(scene, false)}.`,
    });
  if (grid.maxSteps > MAXIMA.steps)
    found.problems.push({
      path: "stop.maxTimeNs",
      sentence: `${String(scene.stop.maxTimeNs)} ns are ${String(grid.maxSteps)} steps of ${round(grid.stepPs)} ps; the maximum is ${String(MAXIMA.steps)}: stop earlier or ${remedy(scene, false)}.`,
    });
  if (found.problems.length === 0) found.problems.push(...memory(scene));
  return found;
};

/** What a run keeps: fields, coefficients and traces, in float64. */
const memory = (scene: ResolvedScene): Problem[] => {
  const { memoryBytes, traceBytes, cells, steps } = estimateCost(scene);
  if (memoryBytes <= MAXIMA.memoryBytes) return [];
  const gib = (bytes: number): string => round(bytes / 1024 ** 3);
  const byTraces = traceBytes > memoryBytes / 2;
  return [
    {
      path: byTraces ? "stop.maxTimeNs" : meshPath(scene),
      sentence: `The run could need ${gib(memoryBytes)} GiB of memory, ${gib(traceBytes)} of them for the traces, with ${String(cells)} cells and ${String(steps)} steps; the maximum is ${gib(MAXIMA.memoryBytes)} GiB: ${byTraces ? "stop earlier, take fewer probes" : "take fewer poles"} or ${remedy(scene, false)}.`,
    },
  ];
};

/** A source that reaches above the band meets a mesh that was not made for it. */
const aboveBand = (scene: ResolvedScene): Problem[] =>
  scene.sources.flatMap((source, index): Problem[] => {
    const { waveform } = source;
    const top =
      waveform.kind === "tone"
        ? waveform.GHz
        : waveform.kind === "pulse"
          ? waveform.centerGHz + waveform.widthGHz / 2
          : 0;
    return top > scene.band.toGHz * (1 + 1e-9)
      ? [
          {
            path: `sources[${String(index)}].waveform`,
            sentence: `It reaches ${round(top)} GHz, above the band's ${String(scene.band.toGHz)} GHz that the mesh is made for; widen the band.`,
          },
        ]
      : [];
  });

/** Refusals and warnings about band and mesh. Lengths that are NaN are passed over. */
export const checkMesh = (scene: ResolvedScene): Findings => {
  if (scene.band.fromGHz >= scene.band.toGHz)
    return {
      problems: [
        {
          path: "band.toGHz",
          sentence: `The band runs from ${String(scene.band.fromGHz)} to ${String(scene.band.toGHz)} GHz; its upper edge must be above its lower one.`,
        },
      ],
      warnings: [],
    };
  const found = sizes(scene);
  return { problems: found.problems, warnings: [...found.warnings, ...aboveBand(scene)] };
};
