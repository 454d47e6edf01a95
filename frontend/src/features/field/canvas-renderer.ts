/** The same picture on a plain 2D canvas, for browsers without WebGL: slower, never missing. */
import type { Frame } from "@heddle/kernels/frames";
import type { FieldRenderer, Placement } from "./field-renderer";
import { levelView } from "./frame-view";

/** Paints levels through a colour table into RGBA pixels, top row first. */
export function paintLevels(frame: Frame, table: Uint8Array, pixels: Uint8ClampedArray): void {
  // Screens count rows from the top, the section from the bottom.
  const fromTop = levelView(frame).step(-1, 1);
  let at = 0;
  for (let row = 0; row < frame.height; row += 1) {
    for (let column = 0; column < frame.width; column += 1) {
      const entry = 4 * fromTop.get(row, column);
      pixels[at] = table[entry] ?? 0;
      pixels[at + 1] = table[entry + 1] ?? 0;
      pixels[at + 2] = table[entry + 2] ?? 0;
      pixels[at + 3] = 255;
      at += 4;
    }
  }
}

/** @throws {Error} where the canvas gives no 2D context either */
export function createCanvasRenderer(canvas: HTMLCanvasElement): FieldRenderer {
  const context = canvas.getContext("2d");
  const raster = document.createElement("canvas");
  const rasterContext = raster.getContext("2d");
  if (context === null || rasterContext === null)
    throw new Error("This browser gives no canvas to draw the field on.");
  let frame: Frame | null = null;
  let table: Uint8Array | null = null;
  let image: ImageData | null = null;

  const paint = (): void => {
    if (frame === null || table === null) return;
    if (image?.width !== frame.width || image.height !== frame.height) {
      raster.width = frame.width;
      raster.height = frame.height;
      image = rasterContext.createImageData(frame.width, frame.height);
    }
    paintLevels(frame, table, image.data);
    rasterContext.putImageData(image, 0, 0);
  };

  return {
    kind: "canvas",
    resize(width, height) {
      if (canvas.width !== width) canvas.width = width;
      if (canvas.height !== height) canvas.height = height;
    },
    setFrame(next) {
      frame = next;
      paint();
    },
    setColours(next) {
      table = next;
      paint();
    },
    draw({ leftPx, topPx, widthPx, heightPx, surfaceWidthPx }: Placement) {
      context.setTransform(1, 0, 0, 1, 0, 0);
      context.clearRect(0, 0, canvas.width, canvas.height);
      if (frame === null) return;
      const pixelRatio = canvas.width / surfaceWidthPx;
      context.setTransform(pixelRatio, 0, 0, pixelRatio, 0, 0);
      context.drawImage(raster, leftPx, topPx, widthPx, heightPx);
    },
    destroy() {
      raster.width = 0;
    },
  };
}
