export type { Scale } from "./colour-maps";
export { FieldKey } from "./field-key";
export { FieldLayer } from "./field-layer";
export { FieldReadout } from "./field-readout";
export type { FieldSlot } from "./field-slot";
export { createFieldSlot } from "./field-slot";
export { quantitiesOf } from "./quantities";
