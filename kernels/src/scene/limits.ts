/** Every maximum of the scene document, in one place; the specs and the sentences of refusal read them from here. */
export const MAXIMA = {
  /** Cells of the section along one axis. */
  cellsPerAxis: 4096,
  steps: 2e7,
  /** Bytes that a run may take by the estimate of its cost: what 32-bit addresses reach. */
  memoryBytes: 4 * 1024 ** 3,
  patches: 5_000,
  /** Points of all polygons, holes, strokes, walls and films together. */
  points: 200_000,
  probes: 200,
  ports: 16,
  sources: 200,
  media: 500,
  parameters: 200,
  limits: 200,
  /** Size of the document as JSON text in UTF-8. */
  jsonBytes: 2 * 1024 * 1024,
  polesPerList: 20,
  /** Values of one sampled waveform. */
  waveformSamples: 200_000,
  nameLength: 200,
  notesLength: 20_000,
  /** Characters of one expression, and how deep its parentheses and calls may nest. */
  expressionLength: 200,
  expressionDepth: 32,
  /** Largest magnitude of any length or coordinate. */
  lengthMm: 1e6,
  frequencyGHz: 1e5,
} as const;

/** A mesh with fewer cells per shortest wavelength is refused; below `comfortable` it draws a warning. */
export const CELLS_PER_WAVELENGTH = { refusedBelow: 8, comfortable: 15 } as const;

/** A medium with a loss tangent above 1 and fewer cells per skin depth than this draws a warning. */
export const CELLS_PER_SKIN_DEPTH = 3;
