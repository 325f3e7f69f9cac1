import type { House } from '../house/house';
import type { PayingSums } from '../measures/paying-sums';
import type { Estimate } from '../measures/sums';
import type { Deal } from './deal';

/** The marginal premium taken apart, for 100%, contract currency. The parts from riskless loss to reinstatements add up to it. */
export interface MarginalPremium {
  readonly premium: Estimate;
  /** E[m·Z]. */
  readonly payoffValue: number;
  /** E[m·ρ]. */
  readonly reinstatementShareValue: number;
  /** E[m]·E[Z]. */
  readonly risklessLoss: number;
  /** Cov(m, Z), the load for paying when capital is lean. */
  readonly leanLoad: number;
  readonly lossAdjustment: number;
  readonly fixedExpense: number;
  /** q·P. */
  readonly brokerageAndExpense: number;
  /** −(1 − q_R)·P·E[m·ρ]. */
  readonly reinstatementValue: number;
}

/** What the marginal premium needs of the house. */
export type HungryStates = Pick<House, 'states' | 'discount' | 'sureValue' | 'slopeSquares' | 'slopeSum'>;

/**
 * Premium of a small line: P = (E[m·Z]·(1 + a) + F/w) / ((1 − q) + (1 − q_R)·E[m·ρ]). The standard error holds E[m] at the
 * riskless price of a sure unit, as anchoring does, by the influence of each state on the ratio.
 */
export function marginalPremium(deal: Deal, sums: PayingSums, house: HungryStates): MarginalPremium {
  const { discount, states, sureValue } = house;
  const payoffValue = (discount * sums.pricedPayoff) / states;
  const reinstatementShareValue = (discount * sums.pricedReinstatement) / states;
  const cost = 1 + deal.lossAdjustment;
  const fixed = deal.fixedExpense / deal.layer.line;
  const kept = 1 - deal.reinstatementDeductions;
  const denominator = 1 - deal.deductions + kept * reinstatementShareValue;
  const value = (payoffValue * cost + fixed) / denominator;
  const risklessLoss = (sureValue * sums.payoff) / states;
  return {
    premium: { value, standardError: errorOf(sums, house, { cost, back: value * kept }) / denominator },
    payoffValue,
    reinstatementShareValue,
    risklessLoss,
    leanLoad: payoffValue - risklessLoss,
    lossAdjustment: payoffValue * deal.lossAdjustment,
    fixedExpense: fixed,
    brokerageAndExpense: value * deal.deductions,
    reinstatementValue: -kept * value * reinstatementShareValue,
  };
}

/** Standard error of E[m·(net − λ)], net = cost·Z − back·ρ and λ its mean under price: what a state adds to it is 0 in the mean. */
function errorOf(sums: PayingSums, house: HungryStates, { cost, back }: { cost: number; back: number }): number {
  const { discount, states } = house;
  const mean = (cost * sums.pricedPayoff - back * sums.pricedReinstatement) / house.slopeSum;
  const squares =
    cost * cost * sums.pricedPayoffSquares -
    2 * cost * back * sums.squaredCross +
    back * back * sums.pricedReinstatementSquares -
    2 * mean * (cost * sums.squaredPayoff - back * sums.squaredReinstatement) +
    mean * mean * house.slopeSquares;
  return (discount * Math.sqrt(Math.max(squares, 0) / (states - 1))) / Math.sqrt(states);
}
