/** The same scene on two meshes: figures at zero cell size, with an error bar. */
import type { Extrapolated } from "../analysis/index.js";
import { extrapolate, unsteady, widest } from "../analysis/index.js";
import type { Extrapolation, MeshPromise, Resonance, Scene, SolveResult } from "../scene/index.js";
import { gridOf, meshPromise, resolveScene } from "../scene/index.js";

/** The scene on cells half as large. */
export function refinedScene(scene: Scene): Scene {
  const { dxMm, dyMm } = gridOf(resolveScene(scene));
  return { ...scene, mesh: { metal: scene.mesh.metal, cellMm: Math.max(dxMm, dyMm) / 2 } };
}

interface Rule extends MeshPromise {
  ratio: number;
}
type Curve = (number | null)[];

/** Uncertainties are the widest over this share of the frequencies to either side. */
const REACH = 1 / 40;

const atZero = (coarse: number, fine: number, { ratio, order, steady }: Rule): Extrapolated =>
  (steady ? extrapolate : unsteady)(coarse, fine, ratio, order);

function realCurves(coarse: Curve, fine: Curve, rule: Rule): { value: Curve; uncertainty: Curve } {
  const both = fine.map((value, n) => {
    const before = coarse[n];
    return value === null || before === null ? null : atZero(before, value, rule);
  });
  return { value: both.map((at) => at && at.value), uncertainty: both.map((at) => at && at.uncertainty) };
}

interface Complex {
  re: Curve;
  im: Curve;
}

function complexCurves(coarse: Complex, fine: Complex, rule: Rule): Complex & { uncertainty: Curve } {
  const re = realCurves(coarse.re, fine.re, rule);
  const im = realCurves(coarse.im, fine.im, rule);
  const uncertainty = re.uncertainty.map((part, n) => {
    const other = im.uncertainty[n];
    return part === null || other === null ? null : Math.hypot(part, other);
  });
  return { re: re.value, im: im.value, uncertainty };
}

const widened = (curves: readonly Curve[]): Curve =>
  widest(curves, Math.ceil((curves.at(0)?.length ?? 0) * REACH));

function probesOf(coarse: SolveResult, fine: SolveResult, rule: Rule): Extrapolation["probes"] {
  return fine.probes.flatMap(({ id, drive, spectrum }): Extrapolation["probes"] => {
    const before = coarse.probes.find((probe) => probe.id === id && probe.drive === drive)?.spectrum;
    if (!spectrum || !before) return [];
    // Areas have frequencies of their own on each mesh: only common ones can be compared.
    const at = spectrum.GHz.flatMap((frequency, n) => {
      const m = before.GHz.indexOf(frequency);
      return m < 0 ? [] : [{ frequency, n, m }];
    });
    const GHz = at.map(({ frequency }) => frequency);
    const ofFine = (curve: Curve): Curve => at.map(({ n }) => curve[n]);
    const ofCoarse = (curve: Curve): Curve => at.map(({ m }) => curve[m]);
    if ("re" in spectrum && "re" in before) {
      const curves = complexCurves(
        { re: ofCoarse(before.re), im: ofCoarse(before.im) },
        { re: ofFine(spectrum.re), im: ofFine(spectrum.im) },
        rule,
      );
      return [{ id, drive, GHz, ...curves, uncertainty: widened([curves.uncertainty]) }];
    }
    if ("value" in spectrum && "value" in before) {
      const curves = realCurves(ofCoarse(before.value), ofFine(spectrum.value), rule);
      return [{ id, drive, GHz, ...curves, uncertainty: widened([curves.uncertainty]) }];
    }
    return [];
  });
}

/** What moves one S of a drive moves the others: all of them have the widest uncertainty among them. */
function sOf(coarse: SolveResult, fine: SolveResult, rule: Rule): Extrapolation["s"] {
  const GHz = fine.ports?.GHz ?? [];
  const found = (fine.ports?.s ?? []).flatMap((one) => {
    const before = coarse.ports?.s.find(({ to, from }) => to === one.to && from === one.from);
    return before ? [{ to: one.to, from: one.from, GHz, ...complexCurves(before, one, rule) }] : [];
  });
  return found.map((entry) => ({
    ...entry,
    uncertainty: widened(
      found.filter(({ from }) => from === entry.from).map(({ uncertainty }) => uncertainty),
    ),
  }));
}

/** Pairs of the same resonance: nearest to each other, whichever probe shows it best on either mesh. */
function pairsOf(coarse: readonly Resonance[], fine: readonly Resonance[]): [Resonance, Resonance][] {
  const nearest = (list: readonly Resonance[], to: Resonance): Resonance | undefined =>
    [...list].sort((p, q) => Math.abs(p.GHz - to.GHz) - Math.abs(q.GHz - to.GHz)).at(0);
  return fine.flatMap((one): [Resonance, Resonance][] => {
    const other = nearest(coarse, one);
    return other && nearest(fine, other) === one ? [[other, one]] : [];
  });
}

function resonancesOf(coarse: SolveResult, fine: SolveResult, rule: Rule): Extrapolation["resonances"] {
  return pairsOf(coarse.resonances ?? [], fine.resonances ?? []).map(([before, after]) => {
    const GHz = atZero(before.GHz, after.GHz, rule);
    const q = before.q === null || after.q === null ? null : atZero(before.q, after.q, rule);
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
 * The result of the scene's own mesh with the figures at zero cell size from it and from the result of a finer mesh at the same
 * frequencies.
 *
 * @param scene the scene of `coarse`, whose geometry tells the order
 */
export function withFinerMesh(scene: Scene, coarse: SolveResult, fine: SolveResult): SolveResult {
  const ratio = Math.sqrt((coarse.grid.dxMm * coarse.grid.dyMm) / (fine.grid.dxMm * fine.grid.dyMm));
  const rule = { ratio, ...meshPromise(resolveScene(scene), coarse.grid.nx, coarse.grid.ny) };
  const more = fine.quality.warnings.filter((sentence) => !coarse.quality.warnings.includes(sentence));
  return {
    ...coarse,
    extrapolation: {
      ...rule,
      probes: probesOf(coarse, fine, rule),
      s: sOf(coarse, fine, rule),
      resonances: resonancesOf(coarse, fine, rule),
    },
    quality: {
      ...coarse.quality,
      warnings: [...coarse.quality.warnings, ...more.map((sentence) => `On the finer mesh: ${sentence}`)],
    },
    timing: { ...coarse.timing, seconds: coarse.timing.seconds + fine.timing.seconds },
  };
}
