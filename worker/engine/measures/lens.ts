import exp from '@stdlib/math-base-special-exp';
import ln from '@stdlib/math-base-special-ln';
import type { House } from '../house/house';

const BINS_A_DECADE = 12;
const FIRST_SHARE = 1e-4;

export interface LensBin {
  readonly shareFrom: number;
  readonly shareTo: number;
  /** Mean m/E[m] over the bin's states. */
  readonly hunger: number;
  readonly meanCapital: number;
  /** By layer: mean Z ÷ limit. */
  readonly payoff: readonly number[];
  /** By layer: Σ m/E[m]·Z/L over the bin, over all states and over the bin's width in natural logarithms: areas add to price ÷ limit. */
  readonly product: readonly number[];
  /** By layer: the same without hunger; areas add to expected loss ÷ limit. */
  readonly plain: readonly number[];
}

/**
 * The lean lens: states in their lean order, binned evenly in the logarithm of the share of states at least as lean. The
 * first bin holds all that are leaner still.
 */
export function leanLens(order: Uint32Array, house: House, layers: readonly { payoff: Float64Array; limit: number }[]): LensBin[] {
  const { states, capital, hunger, sureValue } = house;
  const bins: LensBin[] = [];
  const step = exp(ln(10) / BINS_A_DECADE);
  const width = ln(step);
  let from = 0;
  for (let share = FIRST_SHARE * step; from < states; share *= step) {
    const shareTo = share > 1 / Math.sqrt(step) ? 1 : share;
    const to = Math.min(states, Math.floor(shareTo * states));
    if (to <= from) continue;
    let sumHunger = 0;
    let sumCapital = 0;
    const plain = layers.map(() => 0);
    const weighted = layers.map(() => 0);
    for (let i = from; i < to; i += 1) {
      const s = order[i] ?? 0;
      const m = (hunger[s] ?? 0) / sureValue;
      sumHunger += m;
      sumCapital += capital[s] ?? 0;
      for (let l = 0; l < layers.length; l += 1) {
        const z = layers[l]?.payoff[s] ?? 0;
        if (z === 0) continue;
        plain[l] = (plain[l] ?? 0) + z;
        weighted[l] = (weighted[l] ?? 0) + m * z;
      }
    }
    const previous = bins[bins.length - 1]?.shareTo;
    const shareFrom = previous ?? shareTo / step;
    const thick = previous === undefined ? width : ln(shareTo / shareFrom);
    const n = to - from;
    const over = (sums: number[], by: number): number[] => sums.map((sum, l) => sum / (layers[l]?.limit ?? 1) / by);
    bins.push({
      shareFrom,
      shareTo,
      hunger: sumHunger / n,
      meanCapital: sumCapital / n,
      payoff: over(plain, n),
      product: over(weighted, states * thick),
      plain: over(plain, states * thick),
    });
    from = to;
  }
  return bins;
}

export interface Decile {
  readonly meanCapital: number;
  /** Share of E[Z] from this tenth of states. */
  readonly lossShare: number;
  /** Share of E[m·Z]. */
  readonly priceShare: number;
}

/** Ten groups of states from the leanest to the most plentiful, with what each has of a layer's loss and price. */
export function deciles(order: Uint32Array, house: House, payoff: Float64Array): Decile[] {
  const { states, capital, hunger } = house;
  const groups = Array.from({ length: 10 }, (_unused, d) => {
    const from = Math.floor((d * states) / 10);
    const to = Math.floor(((d + 1) * states) / 10);
    let [sumCapital, loss, price] = [0, 0, 0];
    for (let i = from; i < to; i += 1) {
      const s = order[i] ?? 0;
      sumCapital += capital[s] ?? 0;
      loss += payoff[s] ?? 0;
      price += (payoff[s] ?? 0) * (hunger[s] ?? 0);
    }
    return { meanCapital: sumCapital / (to - from), loss, price };
  });
  const losses = groups.reduce((sum, group) => sum + group.loss, 0);
  const prices = groups.reduce((sum, group) => sum + group.price, 0);
  return groups.map(({ meanCapital, loss, price }) => ({
    meanCapital,
    lossShare: losses === 0 ? 0 : loss / losses,
    priceShare: prices === 0 ? 0 : price / prices,
  }));
}
