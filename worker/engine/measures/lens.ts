import type { LeanBins } from './lean-bins';
import { lensEdges } from './lean-bins';

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

/** What a layer pays in the states of each part of the lean order: Σ Z and Σ m·Z. */
export interface PartSums {
  readonly payoff: Float64Array;
  readonly priced: Float64Array;
}

/** The lean lens: the house in each bin of states, and what each layer pays there. */
export function leanLens(states: number, sureValue: number, bins: LeanBins, layers: readonly { readonly sums: PartSums; readonly limit: number }[]): LensBin[] {
  return lensEdges(states).map(({ shareFrom, shareTo, width, from, to }, b) => {
    const over = (sum: (layer: PartSums) => number, by: number): number[] => layers.map(({ sums, limit }) => sum(sums) / limit / by);
    return {
      shareFrom,
      shareTo,
      hunger: bins.lens[b]?.hunger ?? 0,
      meanCapital: bins.lens[b]?.meanCapital ?? 0,
      payoff: over(({ payoff }) => payoff[b] ?? 0, to - from),
      product: over(({ priced }) => (priced[b] ?? 0) / sureValue, states * width),
      plain: over(({ payoff }) => payoff[b] ?? 0, states * width),
    };
  });
}

export interface Decile {
  readonly meanCapital: number;
  /** Share of E[Z] from this tenth of states. */
  readonly lossShare: number;
  /** Share of E[m·Z]. */
  readonly priceShare: number;
}

/** Ten groups of states from the leanest to the most plentiful, with what each has of a layer's loss and price. */
export function deciles(bins: LeanBins, sums: PartSums): Decile[] {
  const total = (of: Float64Array): number => of.reduce((sum, x) => sum + x, 0);
  const [losses, prices] = [total(sums.payoff), total(sums.priced)];
  return bins.deciles.map(({ meanCapital }, d) => ({
    meanCapital,
    lossShare: losses === 0 ? 0 : (sums.payoff[d] ?? 0) / losses,
    priceShare: prices === 0 ? 0 : (sums.priced[d] ?? 0) / prices,
  }));
}
