import { reinstatementShare } from '../layers/payoff';
import type { HouseBasis, LayerTerms } from '../model/inputs';

/** One layer as a bet of the house: its payoff in each state and what is taken from and given to its premium. */
export interface Deal {
  readonly layer: LayerTerms;
  /** Z in each state, for 100%, contract currency. */
  readonly payoff: Float64Array;
  /** ρ in each state: reinstatement premium as a share of the layer premium. */
  readonly reinstatement: Float64Array;
  /** q: share of the premium that goes to brokerage, taxes and variable expense. */
  readonly deductions: number;
  /** q_R: share of reinstatement premiums that goes to taxes. */
  readonly reinstatementDeductions: number;
  /** a: loss adjustment expense on recoveries. */
  readonly lossAdjustment: number;
  /** F: this layer's part of the contract's fixed expense, borne whatever the line, contract currency. */
  readonly fixedExpense: number;
  /** House currency for one unit, over opening capital: turns contract amounts into capital share. */
  readonly toCapitalShare: number;
}

export function dealOf(layer: LayerTerms, payoff: Float64Array, basis: HouseBasis, place: { layers: number; toHouseCurrency: number }): Deal {
  const reinstatement = new Float64Array(payoff.length);
  if (layer.reinstatements.some((price) => price > 0)) {
    for (let s = 0; s < payoff.length; s += 1) {
      const paid = payoff[s] ?? 0;
      if (paid > 0) reinstatement[s] = reinstatementShare(paid, layer);
    }
  }
  return {
    layer,
    payoff,
    reinstatement,
    deductions: layer.brokerage + basis.taxes + basis.variableExpense,
    reinstatementDeductions: basis.taxes,
    lossAdjustment: basis.lossAdjustment,
    fixedExpense: basis.fixedExpensePerContract / place.layers / place.toHouseCurrency,
    toCapitalShare: place.toHouseCurrency / basis.capital,
  };
}
