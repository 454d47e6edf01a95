/** The same scene on two meshes: figures at zero cell size, with an error bar. */
import { extrapolate, extrapolateComplex } from "../analysis/index.js";
import type { ComplexSpectrum, Extrapolation, Resonance, Scene, SolveResult } from "../scene/index.js";
import { gridOf, meshOrder, resolveScene } from "../scene/index.js";

/** The scene on cells half as large. */
export function refinedScene(scene: Scene): Scene {
  const { dxMm, dyMm } = gridOf(resolveScene(scene));
  return { ...scene, mesh: { metal: scene.mesh.metal, cellMm: Math.max(dxMm, dyMm) / 2 } };
}

interface Rule {
  ratio: number;
  order: number;
}
type Curve = (number | null)[];

function complexCurves(
  coarse: Pick<ComplexSpectrum, "re" | "im">,
  fine: Pick<ComplexSpectrum, "re" | "im">,
  { ratio, order }: Rule,
): { re: Curve; im: Curve; uncertainty: Curve } {
  const curves: { re: Curve; im: Curve; uncertainty: Curve } = { re: [], im: [], uncertainty: [] };
  fine.re.forEach((re, n) => {
    const im = fine.im[n];
    const [re0, im0] = [coarse.re[n], coarse.im[n]];
    const at =
      re === null || im === null || re0 === null || im0 === null
        ? null
        : extrapolateComplex([re0, im0], [re, im], ratio, order);
    curves.re.push(at && at.re);
    curves.im.push(at && at.im);
    curves.uncertainty.push(at && at.uncertainty);
  });
  return curves;
}

function realCurves(
  coarse: Curve,
  fine: Curve,
  { ratio, order }: Rule,
): { value: Curve; uncertainty: Curve } {
  const both = fine.map((value, n) => {
    const before = coarse[n];
    return value === null || before === null ? null : extrapolate(before, value, ratio, order);
  });
  return { value: both.map((at) => at && at.value), uncertainty: both.map((at) => at && at.uncertainty) };
}

/** Pairs of the same resonance: nearest to each other among those of one probe. */
function pairsOf(coarse: readonly Resonance[], fine: readonly Resonance[]): [Resonance, Resonance][] {
  const nearest = (list: readonly Resonance[], to: Resonance): Resonance | undefined =>
    list
      .filter(({ probe }) => probe === to.probe)
      .sort((p, q) => Math.abs(p.GHz - to.GHz) - Math.abs(q.GHz - to.GHz))
      .at(0);
  return fine.flatMap((one): [Resonance, Resonance][] => {
    const other = nearest(coarse, one);
    return other && nearest(fine, other) === one ? [[other, one]] : [];
  });
}

function resonancesOf(coarse: SolveResult, fine: SolveResult, rule: Rule): Extrapolation["resonances"] {
  return pairsOf(coarse.resonances ?? [], fine.resonances ?? []).map(([before, after]) => {
    const GHz = extrapolate(before.GHz, after.GHz, rule.ratio, rule.order);
    const q =
      before.q === null || after.q === null ? null : extrapolate(before.q, after.q, rule.ratio, rule.order);
    return {
      probe: after.probe,
      GHz: GHz.value,
      ghzUncertainty: Math.hypot(GHz.uncertainty, after.ghzUncertainty ?? 0),
      q: q && q.value,
      qUncertainty: q && Math.hypot(q.uncertainty, after.qUncertainty ?? 0),
    };
  });
}

/**
 * The result of the scene's own mesh with the extrapolation from it and from the result of a finer mesh at the same frequencies.
 *
 * @param scene the scene of `coarse`, whose geometry tells the order
 */
export function withFinerMesh(scene: Scene, coarse: SolveResult, fine: SolveResult): SolveResult {
  const ratio = Math.sqrt((coarse.grid.dxMm * coarse.grid.dyMm) / (fine.grid.dxMm * fine.grid.dyMm));
  const rule = { ratio, order: meshOrder(resolveScene(scene)) };
  const probes = fine.probes.flatMap(({ id, drive, spectrum }): Extrapolation["probes"] => {
    const before = coarse.probes.find((probe) => probe.id === id && probe.drive === drive)?.spectrum;
    if (!spectrum || !before) return [];
    const { GHz } = spectrum;
    if ("re" in spectrum && "re" in before)
      return [{ id, drive, GHz, ...complexCurves(before, spectrum, rule) }];
    if ("value" in spectrum && "value" in before)
      return [{ id, drive, GHz, ...realCurves(before.value, spectrum.value, rule) }];
    return [];
  });
  const s = (fine.ports?.s ?? []).flatMap(({ to, from, re, im }): Extrapolation["s"] => {
    const before = coarse.ports?.s.find((one) => one.to === to && one.from === from);
    const GHz = fine.ports?.GHz ?? [];
    return before ? [{ to, from, GHz, ...complexCurves(before, { re, im }, rule) }] : [];
  });
  return {
    ...coarse,
    extrapolation: { ...rule, probes, s, resonances: resonancesOf(coarse, fine, rule) },
    quality: {
      ...coarse.quality,
      warnings: [
        ...coarse.quality.warnings,
        ...fine.quality.warnings
          .filter((sentence) => !coarse.quality.warnings.includes(sentence))
          .map((sentence) => `On the finer mesh: ${sentence}`),
      ],
    },
    timing: {
      ...coarse.timing,
      seconds: coarse.timing.seconds + fine.timing.seconds,
    },
  };
}
