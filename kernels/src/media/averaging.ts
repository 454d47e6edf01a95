/**
 * Means over the quarter cells around a field point.
 *
 * A field out of the plane is continuous across every interface in the plane: ε and σ (μ and σ*) add up by area. A field in the
 * plane is continuous along an interface, while across it the flux is: along the field's own direction admittivities
 * σ + jωε add in series, across it in parallel. The series sum is taken at one frequency, the band's middle, where it
 * is exact for grid-aligned interfaces; the resulting ε and σ are positive, so the update stays passive.
 */
import type { Pair, Properties } from "./properties.js";

/** Which storage and loss a field point needs. */
export type PairKind = "electric" | "magnetic";

/** Shares of a quarter cell that are not perfect conductor, with the properties each has. */
export interface Quarter {
  shares: readonly { share: number; properties: Properties }[];
}

const pairOf = (properties: Properties, kind: PairKind): Pair =>
  kind === "electric"
    ? { storage: properties.epsilon, loss: properties.sigma }
    : { storage: properties.mu, loss: properties.sigmaStar };

const weightOf = (quarter: Quarter): number => quarter.shares.reduce((sum, entry) => sum + entry.share, 0);

/** Mean by area; null where nothing but perfect conductor is there. */
export function arithmeticMean(quarters: readonly Quarter[], kind: PairKind): Pair | null {
  let weight = 0;
  let storage = 0;
  let loss = 0;
  for (const quarter of quarters) {
    for (const { share, properties } of quarter.shares) {
      const pair = pairOf(properties, kind);
      weight += share;
      storage += share * pair.storage;
      loss += share * pair.loss;
    }
  }
  return weight > 0 ? { storage: storage / weight, loss: loss / weight } : null;
}

/** Series sum of two neighbouring quarters along the field, each first averaged by area. */
function seriesMean(first: Quarter, second: Quarter, kind: PairKind, omega: number): Pair | null {
  const a = arithmeticMean([first], kind);
  const b = arithmeticMean([second], kind);
  if (!a || !b) return a ?? b;
  const wa = weightOf(first);
  const wb = weightOf(second);
  if (a.storage === b.storage && a.loss === b.loss) return a;
  // 1/y of both, weighted by length; y = loss + jω·storage.
  const ya = a.loss * a.loss + (omega * a.storage) ** 2;
  const yb = b.loss * b.loss + (omega * b.storage) ** 2;
  const re = ((wa * a.loss) / ya + (wb * b.loss) / yb) / (wa + wb);
  const im = -((wa * omega * a.storage) / ya + (wb * omega * b.storage) / yb) / (wa + wb);
  const norm = re * re + im * im;
  return { storage: -im / norm / omega, loss: re / norm };
}

/**
 * Mean for a field in the plane. `lanes` are the two pairs of quarters that follow each other along the field.
 *
 * @param omega rad/s at which the series sum is exact
 */
export function inPlaneMean(
  lanes: readonly (readonly [Quarter, Quarter])[],
  kind: PairKind,
  omega: number,
): Pair | null {
  let weight = 0;
  let storage = 0;
  let loss = 0;
  for (const [first, second] of lanes) {
    const mean = seriesMean(first, second, kind, omega);
    if (!mean) continue;
    const laneWeight = weightOf(first) + weightOf(second);
    weight += laneWeight;
    storage += laneWeight * mean.storage;
    loss += laneWeight * mean.loss;
  }
  return weight > 0 ? { storage: storage / weight, loss: loss / weight } : null;
}
