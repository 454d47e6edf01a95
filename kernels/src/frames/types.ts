/** What a viewer asks for, what the solver samples, and what travels. PROTOCOL.md says how it is laid out in bytes. */

/** Field quantities of a frame. Components exist per polarization; magnitudes and densities in both. */
export const FIELD_QUANTITIES = [
  "Ez",
  "Hx",
  "Hy",
  "Hz",
  "Ex",
  "Ey",
  "absE",
  "absH",
  "energyDensity",
  "lossDensity",
] as const;
export type FieldQuantity = (typeof FIELD_QUANTITIES)[number];

export interface ViewRequest {
  quantity: FieldQuantity;
  /** Size wanted in samples; the answer is at most this and at most the lattice's own size. */
  width: number;
  height: number;
}

/** Quantities that have a phasor or an envelope: fields, not densities. */
export type MapQuantity = Exclude<FieldQuantity, "energyDensity" | "lossDensity">;

/** A phasor at one of the frequencies that a run keeps maps of. absE and absH have a magnitude alone: √(|x|² + |y|²). */
export interface MapRequest extends ViewRequest {
  quantity: MapQuantity;
  GHz: number;
  part: "magnitude" | "real" | "imaginary";
}

/** The largest magnitude that a frame of the run has shown at each place. */
export interface EnvelopeRequest extends ViewRequest {
  quantity: "absE" | "absH";
}

/** A quantity over the whole section on a regular raster; row 0 is the bottom (smallest y). */
export interface FieldSample {
  quantity: FieldQuantity;
  width: number;
  height: number;
  /** width × height values in the quantity's SI unit, row-major from the lower-left corner. */
  values: Float32Array;
  step: number;
  timeNs: number;
}

/** A frame as it travels: 8-bit levels with the scale that turns them back into SI units. */
export interface Frame {
  quantity: FieldQuantity;
  width: number;
  height: number;
  step: number;
  timeNs: number;
  /** Rises with every frame of a run; a viewer returns it as its credit. */
  sequence: number;
  /** Value of level 255 (signed quantities: level 128 is 0 and level 1 is −range; others: level 0 is 0). */
  range: number;
  /** Largest magnitude in the frame, before it was cut to `range`. */
  peak: number;
  levels: Uint8Array;
}

export const isSigned = (quantity: FieldQuantity): boolean => quantity.length === 2;
