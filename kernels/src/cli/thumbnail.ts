/** A small picture of a section: field as an ink wash, hatches for metal and loss, line work, marks. */
import { PNG } from "pngjs";
import type { FieldSample } from "../frames/index.js";
import { isPerfect, type Medium, mediumAt, type ResolvedScene } from "../scene/index.js";

type Colour = readonly [number, number, number];

const SHEET: Colour = [0xfb, 0xf9, 0xf3];
const INK: Colour = [0x23, 0x28, 0x2e];
const METAL: Colour = [0xc9, 0xc7, 0xc0];
const TINT: Colour = [0xd9, 0xd3, 0xc3];
const ACCENT: Colour = [0x0f, 0x6b, 0x5c];
/** BrBG, seven classes (C. A. Brewer, ColorBrewer), its middle replaced by the sheet's own colour. */
const DIVERGING: readonly Colour[] = [
  [0x8c, 0x51, 0x0a],
  [0xd8, 0xb3, 0x65],
  [0xf6, 0xe8, 0xc3],
  SHEET,
  [0xc7, 0xea, 0xe5],
  [0x5a, 0xb4, 0xac],
  [0x01, 0x66, 0x5e],
];

const mix = (a: Colour, b: Colour, share: number): Colour => [
  a[0] + (b[0] - a[0]) * share,
  a[1] + (b[1] - a[1]) * share,
  a[2] + (b[2] - a[2]) * share,
];

/** Colour of a value from −1 to 1. */
const washOf = (value: number): Colour => {
  const at = ((Math.min(1, Math.max(-1, value)) + 1) / 2) * (DIVERGING.length - 1);
  const low = Math.min(DIVERGING.length - 2, Math.floor(at));
  return mix(DIVERGING[low], DIVERGING[low + 1], at - low);
};

/** The magnitude that all but one in two hundred samples stay below, so that a source's own spot does not set the scale. */
const scaleOf = (values: Float32Array): number => {
  const sorted = values.map(Math.abs).sort();
  return sorted[Math.floor(0.995 * (sorted.length - 1))] || 1;
};

/** Pixels are drawn this many times finer along each side and averaged, for smooth line work. */
const FINER = 3;

class Canvas {
  readonly pixels: Float32Array;
  constructor(
    readonly width: number,
    readonly height: number,
  ) {
    this.pixels = new Float32Array(width * height * 3);
  }

  at(x: number, y: number): Colour {
    const index = 3 * (y * this.width + x);
    return [this.pixels[index], this.pixels[index + 1], this.pixels[index + 2]];
  }

  set(x: number, y: number, colour: Colour): void {
    if (x >= 0 && x < this.width && y >= 0 && y < this.height)
      this.pixels.set(colour, 3 * (y * this.width + x));
  }

  disc(cx: number, cy: number, radius: number, colour: Colour): void {
    const reach = Math.ceil(radius);
    for (let dy = -reach; dy <= reach; dy++)
      for (let dx = -reach; dx <= reach; dx++)
        if (dx * dx + dy * dy <= radius * radius) this.set(Math.round(cx) + dx, Math.round(cy) + dy, colour);
  }

  line(from: readonly [number, number], to: readonly [number, number], radius: number, colour: Colour): void {
    const steps = Math.max(1, Math.ceil(Math.hypot(to[0] - from[0], to[1] - from[1])));
    for (let step = 0; step <= steps; step++) {
      const t = step / steps;
      this.disc(from[0] + (to[0] - from[0]) * t, from[1] + (to[1] - from[1]) * t, radius, colour);
    }
  }
}

/** Whether a hatch line of the given spacing runs through a pixel: falling (σ), rising (σ*). */
const onHatch = (x: number, y: number, spacing: number, rising: boolean): boolean => {
  const along = rising ? x - y : x + y;
  return ((along % spacing) + spacing) % spacing < FINER;
};

const mediumColour = (medium: Medium | undefined, wash: Colour, x: number, y: number): Colour => {
  if (medium === undefined) return wash;
  if (isPerfect(medium)) return onHatch(x, y, 5 * FINER, true) ? mix(METAL, INK, 0.45) : METAL;
  const dense = medium.relativePermittivity > 1 || medium.relativePermeability > 1;
  const tinted = dense ? mix(wash, TINT, 0.35) : wash;
  const hatched =
    (medium.conductivity > 0 && onHatch(x, y, 6 * FINER, false)) ||
    (medium.magneticLoss > 0 && onHatch(x, y, 6 * FINER, true));
  return hatched ? mix(tinted, INK, 0.6) : tinted;
};

const fieldAt = (field: FieldSample, u: number, v: number): number => {
  const x = Math.min(field.width - 1, Math.floor(u * field.width));
  const y = Math.min(field.height - 1, Math.floor(v * field.height));
  return field.values[y * field.width + x];
};

const paintSection = (canvas: Canvas, scene: ResolvedScene, field: FieldSample): void => {
  const { width, height } = canvas;
  const { widthMm, heightMm } = scene.section;
  const scale = scaleOf(field.values);
  const media: (Medium | undefined)[] = [];
  for (let y = 0; y < height; y++)
    for (let x = 0; x < width; x++) {
      const u = (x + 0.5) / width;
      const v = 1 - (y + 0.5) / height;
      const medium = mediumAt(scene, u * widthMm, v * heightMm);
      media.push(medium);
      canvas.set(x, y, mediumColour(medium, washOf(fieldAt(field, u, v) / scale), x, y));
    }
  // An outline wherever the medium changes to the right or below.
  for (let y = 0; y < height - 1; y++)
    for (let x = 0; x < width - 1; x++) {
      const here = media[y * width + x];
      if (here !== media[y * width + x + 1] || here !== media[(y + 1) * width + x])
        canvas.disc(x, y, 1.4, INK);
    }
};

const drawMarks = (canvas: Canvas, scene: ResolvedScene): void => {
  const { widthMm, heightMm } = scene.section;
  const place = ([x, y]: readonly [number, number]): [number, number] => [
    (x / widthMm) * canvas.width,
    (1 - y / heightMm) * canvas.height,
  ];
  for (const patch of scene.paint)
    if (patch.kind === "wall" || patch.kind === "film")
      for (let index = 1; index < patch.points.length; index++)
        canvas.line(place(patch.points[index - 1]), place(patch.points[index]), 1.8, INK);
  for (const source of scene.sources)
    if (source.kind === "line") {
      const [x, y] = place([source.x, source.y]);
      canvas.disc(x, y, 4.5 * FINER, SHEET);
      canvas.disc(x, y, 3.5 * FINER, ACCENT);
    }
  for (const probe of scene.probes)
    if (probe.kind === "point") {
      const [x, y] = place([probe.x, probe.y]);
      canvas.disc(x, y, 4 * FINER, SHEET);
      canvas.disc(x, y, 3 * FINER, INK);
      canvas.disc(x, y, 1.8 * FINER, SHEET);
    }
  const frame: [number, number][] = [
    [1, 1],
    [canvas.width - 2, 1],
    [canvas.width - 2, canvas.height - 2],
    [1, canvas.height - 2],
  ];
  frame.forEach((corner, index) => {
    canvas.line(corner, frame[(index + 1) % 4], 1.5, INK);
  });
};

const averaged = (canvas: Canvas, width: number, height: number): PNG => {
  const png = new PNG({ width, height });
  for (let y = 0; y < height; y++)
    for (let x = 0; x < width; x++) {
      let sum: Colour = [0, 0, 0];
      for (let dy = 0; dy < FINER; dy++)
        for (let dx = 0; dx < FINER; dx++) {
          const colour = canvas.at(FINER * x + dx, FINER * y + dy);
          sum = [sum[0] + colour[0], sum[1] + colour[1], sum[2] + colour[2]];
        }
      const at = 4 * (y * width + x);
      sum.forEach((value, channel) => {
        png.data[at + channel] = Math.round(value / FINER ** 2);
      });
      png.data[at + 3] = 255;
    }
  return png;
};

/** A section's shape is kept, but no thumbnail is flatter than this. */
const FLATTEST = 6;

/** PNG bytes, `width` pixels wide, of a section with a field over it. */
export const drawThumbnail = (scene: ResolvedScene, field: FieldSample, width: number): Buffer => {
  const ratio = Math.min(FLATTEST, scene.section.widthMm / scene.section.heightMm);
  const height = Math.round(width / ratio);
  const canvas = new Canvas(width * FINER, height * FINER);
  paintSection(canvas, scene, field);
  drawMarks(canvas, scene);
  return PNG.sync.write(averaged(canvas, width, height), { colorType: 2, deflateLevel: 9 });
};
