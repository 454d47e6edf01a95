/**
 * Means of dispersive media at a field point.
 *
 * For a field out of the plane, poles add up by area like ε. For a field in the plane no sum of the same poles is exact: the mean
 * without poles, and the mean at the band's middle with them, are both taken as for other media, and the poles by area are
 * multiplied by the one factor, 0 to 1, that brings the first as near to the second as a real factor can.
 *
 * In the absorbing layers, and on a G beside an F in one, a dispersive medium has its ε and σ of the band's middle for good, with ε at
 * least that of vacuum.
 */
import { EPS0, MU0 } from "../lattice/index.js";
import { susceptibility } from "../scene/media-figures.js";
import type { PairKind, Quarter } from "./averaging.js";
import type { PoleModel } from "./poles.js";
import { poleModel } from "./poles.js";
import type { Pair, Properties } from "./properties.js";

export interface WeightedPole {
  model: PoleModel;
  /** ε₀ times the pole's share over ε + ε₀g₀ + σΔt/2: what its term takes off v. */
  weight: number;
}

export interface PointMean {
  pair: Pair;
  poles: readonly WeightedPole[];
}

interface Prepared {
  bare: Properties;
  /** At the band's middle, poles included. */
  middle: Properties;
  /** The same with no less storage than vacuum. */
  frozen: Properties;
  models: Readonly<Record<PairKind, readonly PoleModel[]>>;
}

const VACUUM_OF: Readonly<Record<PairKind, number>> = { electric: EPS0, magnetic: MU0 };

/** Σχ of poles at ω, im ≤ 0. */
const chiOf = (models: readonly { model: PoleModel; share: number }[], omega: number): [number, number] => {
  let [re, im] = [0, 0];
  for (const { model, share } of models) {
    const chi = susceptibility(model.pole, omega / 2e9 / Math.PI);
    re += share * chi.re;
    im += share * chi.im;
  }
  return [re, im];
};

export class DispersiveMeans {
  private readonly prepared = new Map<Properties, Prepared>();

  constructor(
    media: readonly Properties[],
    private readonly dt: number,
    private readonly omega: number,
  ) {
    for (const properties of media) if (properties.poles) this.prepare(properties, properties.poles);
  }

  /** Whether any medium has poles. */
  get any(): boolean {
    return this.prepared.size > 0;
  }

  private prepare(properties: Properties, poles: NonNullable<Properties["poles"]>): void {
    const { epsilon, mu, sigma, sigmaStar } = properties;
    const models = {
      electric: poles.electric.map((pole) => poleModel(pole, this.dt)),
      magnetic: poles.magnetic.map((pole) => poleModel(pole, this.dt)),
    };
    const whole = (list: readonly PoleModel[]): { model: PoleModel; share: number }[] =>
      list.map((model) => ({ model, share: 1 }));
    const electric = chiOf(whole(models.electric), this.omega);
    const magnetic = chiOf(whole(models.magnetic), this.omega);
    const middle = {
      epsilon: epsilon + EPS0 * electric[0],
      mu: mu + MU0 * magnetic[0],
      sigma: sigma - this.omega * EPS0 * electric[1],
      sigmaStar: sigmaStar - this.omega * MU0 * magnetic[1],
    };
    const frozen = { ...middle, epsilon: Math.max(EPS0, middle.epsilon), mu: Math.max(MU0, middle.mu) };
    this.prepared.set(properties, { bare: { epsilon, mu, sigma, sigmaStar }, middle, frozen, models });
  }

  /**
   * Mean of the quarters around a point.
   *
   * @param mean how media without poles are averaged; null where there is none
   */
  of(
    quarters: readonly Quarter[],
    kind: PairKind,
    inLayer: boolean,
    mean: (quarters: readonly Quarter[]) => Pair | null,
  ): PointMean | null {
    const plain = (pair: Pair | null): PointMean | null => pair && { pair, poles: [] };
    if (!this.any) return plain(mean(quarters));
    const shares = this.sharesOf(quarters, kind);
    if (inLayer) return plain(mean(this.replaced(quarters, "frozen")));
    const bare = mean(this.replaced(quarters, "bare"));
    if (!bare || shares.length === 0) return plain(bare);
    const middle = mean(this.replaced(quarters, "middle")) ?? bare;
    const vacuum = VACUUM_OF[kind];
    const [re, im] = chiOf(shares, this.omega);
    const added = [(middle.storage - bare.storage) / vacuum, (bare.loss - middle.loss) / vacuum / this.omega];
    const norm = re * re + im * im;
    const factor = norm > 0 ? Math.min(1, Math.max(0, (added[0] * re + added[1] * im) / norm)) : 0;
    const instant = shares.reduce((sum, { model, share }) => sum + share * factor * model.instant, 0);
    const pair = { storage: bare.storage + vacuum * instant, loss: bare.loss };
    const whole = vacuum / (pair.storage + (pair.loss * this.dt) / 2);
    return {
      pair,
      poles: shares.map(({ model, share }) => ({ model, weight: share * factor * whole })),
    };
  }

  /** Shares by area of the poles around a point. */
  private sharesOf(quarters: readonly Quarter[], kind: PairKind): { model: PoleModel; share: number }[] {
    const areas = new Map<PoleModel, number>();
    let open = 0;
    for (const quarter of quarters) {
      for (const { share, properties } of quarter.shares) {
        open += share;
        for (const model of this.prepared.get(properties)?.models[kind] ?? [])
          areas.set(model, (areas.get(model) ?? 0) + share);
      }
    }
    return [...areas].map(([model, area]) => ({ model, share: area / open }));
  }

  private replaced(quarters: readonly Quarter[], by: "bare" | "middle" | "frozen"): Quarter[] {
    return quarters.map(({ shares, ...rest }) => ({
      ...rest,
      shares: shares.map((entry) => ({
        ...entry,
        properties: this.prepared.get(entry.properties)?.[by] ?? entry.properties,
      })),
    }));
  }
}
