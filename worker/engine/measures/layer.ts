import type { House } from '../house/house';
import type { HouseBasis } from '../model/inputs';
import type { Deal } from '../premiums/deal';
import type { MarginalPremium } from '../premiums/marginal';
import type { PayingSums } from './paying-sums';
import { estimateOf, type Estimate } from './sums';

/** Fewer effective states than this and the price is called thin. */
export const THIN_STATES = 2500;

export interface PremiumSplit {
  readonly risklessLoss: number;
  readonly leanLoad: number;
  readonly lossAdjustment: number;
  readonly fixedExpense: number;
  readonly brokerageAndExpense: number;
  readonly reinstatementValue: number;
  readonly marginalPremium: number;
  readonly lineSizeLoad: number;
  readonly walkAwayPremium: number;
  readonly margin: number;
  readonly minimumTopUp: number;
  readonly technicalPremium: number;
}

/** Technical premium = max(walk-away × (1 + margin), minimum rate on line × limit), with every step from the expected loss. */
export function premiumSplit(marginal: MarginalPremium, walkAway: number, limit: number, basis: HouseBasis): PremiumSplit {
  const loaded = walkAway * (1 + basis.targetMargin);
  const technicalPremium = Math.max(loaded, basis.minimumRateOnLine * limit);
  return {
    risklessLoss: marginal.risklessLoss,
    leanLoad: marginal.leanLoad,
    lossAdjustment: marginal.lossAdjustment,
    fixedExpense: marginal.fixedExpense,
    brokerageAndExpense: marginal.brokerageAndExpense,
    reinstatementValue: marginal.reinstatementValue,
    marginalPremium: marginal.premium.value,
    lineSizeLoad: walkAway - marginal.premium.value,
    walkAwayPremium: walkAway,
    margin: loaded - walkAway,
    minimumTopUp: technicalPremium - loaded,
    technicalPremium,
  };
}

export interface PayoffMeasures {
  readonly expectedLoss: Estimate;
  readonly standardDeviation: number;
  readonly attachmentProbability: Estimate;
  readonly exhaustionProbability: Estimate;
  readonly pricedAttachmentProbability: Estimate;
  readonly expectedReinstatement: Estimate;
  readonly effectiveStates: number;
  readonly thin: boolean;
}

/** A probability from how many states of the grid it happens in. */
export function probabilityOf(happens: number, states: number): Estimate {
  const value = happens / states;
  return { value, standardError: Math.sqrt((value * (1 - value)) / states) };
}

/**
 * Price-weighted probability E[m·1]/E[m] of states that happen with probability p, with the standard error of the ratio:
 * a state moves it by m·(1 − value)/E[m] where it happens and −m·value/E[m] elsewhere.
 */
export function pricedProbability(house: House, slopes: number, squares: number): Estimate {
  const value = slopes / house.slopeSum;
  const scatter = squares * (1 - 2 * value) + value * value * house.slopeSquares;
  return { value, standardError: Math.sqrt(Math.max(scatter, 0)) / house.slopeSum };
}

/**
 * Mean over all states, its error and the deviation, from sums over the states that are not 0. A yearly figure's deviation is
 * never small beside its mean here, so that no digits are lost between the squares.
 */
function estimateOver(states: number, sum: number, squares: number): Estimate & { readonly deviation: number } {
  return estimateOf(states, sum, squares - (sum * sum) / states);
}

/** What a layer's payoff looks like over the states, and how many of them carry its price: 1/Σw², w their shares of E[m·Z]. */
export function payoffMeasures(deal: Deal, sums: PayingSums, house: House): PayoffMeasures {
  const { states } = house;
  const loss = estimateOver(states, sums.payoff, sums.payoffSquares);
  const back = estimateOver(states, sums.reinstatement, sums.reinstatementSquares);
  const effectiveStates = sums.pricedPayoffSquares === 0 ? 0 : (sums.pricedPayoff * sums.pricedPayoff) / sums.pricedPayoffSquares;
  return {
    expectedLoss: { value: loss.value, standardError: loss.standardError },
    standardDeviation: loss.deviation,
    attachmentProbability: probabilityOf(deal.paying.state.length, states),
    exhaustionProbability: probabilityOf(sums.exhausted, states),
    pricedAttachmentProbability: pricedProbability(house, sums.slope, sums.slopeSquares),
    expectedReinstatement: { value: back.value, standardError: back.standardError },
    effectiveStates,
    thin: effectiveStates < THIN_STATES,
  };
}
