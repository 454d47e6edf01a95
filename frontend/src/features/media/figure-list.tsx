import type { Medium } from "@heddle/kernels/scene";
import { figure, formatSi, frequency } from "../../lib/figures";
import {
  attenuationWords,
  figuresOf,
  impedanceWords,
  matchWords,
  reflectionWords,
  skinDepthWords,
} from "./meanings";

/** What a medium means at a frequency, as a list of figures. */
export function FigureList({ medium, gigahertz }: { medium: Medium | null; gigahertz: number }) {
  const figures = medium === null ? null : figuresOf(medium, gigahertz);
  const words =
    medium === null
      ? "Shown when every figure is valid."
      : figures === null
        ? "A perfect conductor has no inside: everything is reflected."
        : null;
  return (
    <section className="figure-list" aria-label={`At ${frequency(gigahertz)}`} aria-live="polite">
      <h3 className="label">
        At <span style={{ textTransform: "none" }}>{frequency(gigahertz)}</span>
      </h3>
      {figures === null ? (
        <p>{words}</p>
      ) : (
        <dl>
          <dt>Skin depth</dt>
          <dd>{skinDepthWords(figures)}</dd>
          <dt>Attenuation</dt>
          <dd>{attenuationWords(figures)} dB/mm</dd>
          <dt>Wavelength</dt>
          <dd>{formatSi(figures.wavelengthMm / 1000, "m")}</dd>
          <dt>Wave impedance</dt>
          <dd>{impedanceWords(figures)}</dd>
          <dt>Reflection from air</dt>
          <dd>{reflectionWords(figures)}</dd>
          <dt>Loss tangent, ε</dt>
          <dd>{figure(figures.electricLossTangent)}</dd>
          <dt>Loss tangent, μ</dt>
          <dd>{figure(figures.magneticLossTangent)}</dd>
          <dt>σ/ε against σ*/μ</dt>
          <dd>{matchWords(figures)}</dd>
        </dl>
      )}
    </section>
  );
}
