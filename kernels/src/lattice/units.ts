/**
 * Lengths live in three spaces: millimetres of the scene, metres of the solver, cells of the lattice. They are
 * branded so that one is not taken for another.
 */
declare const unit: unique symbol;
type Branded<Unit extends string> = number & { readonly [unit]: Unit };

export type Mm = Branded<"mm">;
export type Metre = Branded<"m">;
export type Ghz = Branded<"GHz">;

export const mm = (value: number): Mm => value as Mm;
export const ghz = (value: number): Ghz => value as Ghz;
export const metreOfMm = (value: Mm): Metre => (value / 1000) as Metre;
export const mmOfMetre = (value: Metre): Mm => (value * 1000) as Mm;
export const hertzOfGhz = (value: Ghz): number => value * 1e9;
