/** The field as one textured rectangle: levels in a luminance texture, colours in a 256 × 1 texture (WebGL 1). */
import type { Frame } from "@heddle/kernels/frames";
import type { Texture2D, Vec4 } from "regl";
import createREGL from "regl";
import type { FieldRenderer, Placement } from "./field-renderer";

const VERTEX = `
precision highp float;
attribute vec2 corner;
uniform vec4 rectangle;
varying vec2 place;
void main() {
  place = corner;
  gl_Position = vec4(mix(rectangle.xy, rectangle.zw, corner), 0.0, 1.0);
}`;

const FRAGMENT = `
#ifdef GL_FRAGMENT_PRECISION_HIGH
precision highp float;
#else
precision mediump float;
#endif
uniform sampler2D levels;
uniform sampler2D colours;
varying vec2 place;
void main() {
  float level = texture2D(levels, place).r * 255.0;
  gl_FragColor = texture2D(colours, vec2((level + 0.5) / 256.0, 0.5));
}`;

const CLEAR = { color: [0, 0, 0, 0] as Vec4 };

export interface WebglOptions {
  canvas: HTMLCanvasElement;
  /** The context came back after a loss: draw again. */
  onRestored: () => void;
}

/** @throws {Error} where the browser offers no WebGL; the caller then takes the plain canvas. */
export function createWebglRenderer({ canvas, onRestored }: WebglOptions): FieldRenderer {
  const regl = createREGL({
    canvas,
    attributes: { alpha: true, antialias: false, depth: false, stencil: false, premultipliedAlpha: true },
  });
  const levels: Texture2D = regl.texture({
    width: 1,
    height: 1,
    format: "luminance",
    type: "uint8",
    min: "linear",
    mag: "linear",
    wrap: "clamp",
  });
  const colours: Texture2D = regl.texture({
    width: 256,
    height: 1,
    format: "rgba",
    min: "linear",
    mag: "linear",
  });
  const rectangle: [number, number, number, number] = [0, 0, 0, 0];
  const rectangleOf = (): Vec4 => rectangle;
  const drawRectangle = regl({
    vert: VERTEX,
    frag: FRAGMENT,
    attributes: { corner: [0, 0, 1, 0, 0, 1, 1, 1] },
    uniforms: { rectangle: rectangleOf, levels, colours },
    primitive: "triangle strip",
    count: 4,
    depth: { enable: false },
  });

  let frame: Frame | null = null;
  let table: Uint8Array | null = null;
  let lost = false;
  let textureWidth = 1;
  let textureHeight = 1;
  // One options object for the life of the layer, so that a frame allocates nothing here.
  const image = { data: new Uint8Array(1), width: 1, height: 1, format: "luminance", type: "uint8" } as const;
  const mutableImage: { data: Uint8Array; width: number; height: number } = image;

  const upload = (): void => {
    if (frame === null || lost) return;
    mutableImage.data = frame.levels;
    mutableImage.width = frame.width;
    mutableImage.height = frame.height;
    if (frame.width === textureWidth && frame.height === textureHeight) {
      levels.subimage(image);
      return;
    }
    textureWidth = frame.width;
    textureHeight = frame.height;
    levels({ ...image, min: "linear", mag: "linear", wrap: "clamp" });
  };
  const uploadColours = (): void => {
    if (table !== null && !lost) colours.subimage({ data: table, width: 256, height: 1, format: "rgba" });
  };
  const whenLost = regl.on("lost", () => {
    lost = true;
  });
  const whenRestored = regl.on("restore", () => {
    lost = false;
    // Textures come back empty and with their size; the data is ours to give again.
    uploadColours();
    upload();
    onRestored();
  });

  return {
    kind: "webgl",
    resize(width, height) {
      if (canvas.width !== width) canvas.width = width;
      if (canvas.height !== height) canvas.height = height;
    },
    setFrame(next) {
      frame = next;
      upload();
    },
    setColours(next) {
      table = next;
      uploadColours();
    },
    draw(placement: Placement) {
      if (lost) return;
      regl.poll();
      regl.clear(CLEAR);
      if (frame === null) return;
      const { leftPx, topPx, widthPx, heightPx, surfaceWidthPx, surfaceHeightPx } = placement;
      rectangle[0] = (2 * leftPx) / surfaceWidthPx - 1;
      rectangle[1] = 1 - (2 * (topPx + heightPx)) / surfaceHeightPx;
      rectangle[2] = (2 * (leftPx + widthPx)) / surfaceWidthPx - 1;
      rectangle[3] = 1 - (2 * topPx) / surfaceHeightPx;
      drawRectangle();
    },
    destroy() {
      whenLost.cancel();
      whenRestored.cancel();
      regl.destroy();
    },
  };
}
