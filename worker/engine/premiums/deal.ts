import type { LayerStates } from '../layers/layer-states';
import type { HouseBasis } from '../model/inputs';
import type { LayerTerms } from '../model/layer';

/** One layer as a bet of the house: the states in which it pays and what is taken from and given to its premium. */
export interface Deal {
  readonly layer: LayerTerms;
  readonly paying: LayerStates;
  /** q: share of the premium that goes to brokerage, taxes and variable expense. */
  readonly deductions: number;
  /** q_R: share of reinstatement premiums that goes to taxes, and to brokerage where the slip says so. */
  readonly reinstatementDeductions: number;
  /** a: loss adjustment expense on recoveries. */
  readonly lossAdjustment: number;
  /** F: this layer's part of the contract's fixed expense, borne whatever the line, contract currency. */
  readonly fixedExpense: number;
  /** House currency for one unit, over opening capital: turns contract amounts into capital share. */
  readonly toCapitalShare: number;
}

export function dealOf(layer: LayerTerms, paying: LayerStates, basis: HouseBasis, place: { layers: number; toHouseCurrency: number }): Deal {
  return {
    layer,
    paying,
    deductions: layer.brokerage + basis.taxes + basis.variableExpense,
    reinstatementDeductions: basis.taxes + (layer.brokerageOnReinstatements === true ? layer.brokerage : 0),
    lossAdjustment: basis.lossAdjustment,
    fixedExpense: basis.fixedExpensePerContract / place.layers / place.toHouseCurrency,
    toCapitalShare: place.toHouseCurrency / basis.capital,
  };
}

/** How a deal at its line changes the house's capital share: by so much for each unit of premium, of ρ times premium, and of Z. */
export interface CapitalEffect {
  readonly ofPremium: number;
  readonly ofReinstatement: number;
  readonly ofPayoff: number;
  /** The fixed expense at the year's end, whatever the premium. */
  readonly fixed: number;
}

export function capitalEffect(deal: Deal, sureValue: number): CapitalEffect {
  const share = deal.layer.line * deal.toCapitalShare;
  return {
    ofPremium: (share * (1 - deal.deductions)) / sureValue,
    ofReinstatement: share * (1 - deal.reinstatementDeductions),
    ofPayoff: -share * (1 + deal.lossAdjustment),
    fixed: -(deal.fixedExpense / sureValue) * deal.toCapitalShare,
  };
}
