import type { House } from '../house/house';
import { sumByBlock, type Estimate } from '../measures/sums';
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
export type HungryStates = Pick<House, 'states' | 'slope' | 'discount' | 'sureValue' | 'slopeSquares' | 'slopeSum'>;

/**
 * Premium of a small line: P = (E[m·Z]·(1 + a) + F/w) / ((1 − q) + (1 − q_R)·E[m·ρ]). The standard error holds E[m] at the
 * riskless price of a sure unit, as anchoring does, by the influence of each state on the ratio.
 */
export function marginalPremium(deal: Deal, house: HungryStates): MarginalPremium {
  const { layer, paying } = deal;
  const { blockStart, state, payoff, reinstatement } = paying;
  const { slope, discount, states, sureValue } = house;
  const hunger = (i: number): number => discount * (slope[state[i] ?? 0] ?? 0);
  const payoffValue = sumByBlock(blockStart, (i) => hunger(i) * (payoff[i] ?? 0)) / states;
  const reinstatementShareValue = sumByBlock(blockStart, (i) => hunger(i) * (reinstatement[i] ?? 0)) / states;
  const meanPayoff = sumByBlock(blockStart, (i) => payoff[i] ?? 0) / states;
  const cost = 1 + deal.lossAdjustment;
  const fixed = deal.fixedExpense / layer.line;
  const kept = 1 - deal.reinstatementDeductions;
  const denominator = 1 - deal.deductions + kept * reinstatementShareValue;
  const value = (payoffValue * cost + fixed) / denominator;
  const risklessLoss = sureValue * meanPayoff;
  return {
    premium: { value, standardError: errorOf(deal, house, value, (payoffValue * cost - value * kept * reinstatementShareValue) / sureValue, denominator) },
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

/** A state moves the ratio by m·(net − slope)/denominator; where the layer does not pay, net is 0. */
function errorOf(deal: Deal, house: HungryStates, premium: number, slope: number, denominator: number): number {
  const { blockStart, state, payoff, reinstatement } = deal.paying;
  const { discount, states } = house;
  const cost = 1 + deal.lossAdjustment;
  const kept = 1 - deal.reinstatementDeductions;
  const net = (i: number): number => (payoff[i] ?? 0) * cost - premium * kept * (reinstatement[i] ?? 0);
  const hunger = (i: number): number => discount * (house.slope[state[i] ?? 0] ?? 0);
  const all = slope * slope * discount * discount * house.slopeSquares;
  const squares = all + sumByBlock(blockStart, (i) => hunger(i) * hunger(i) * net(i) * (net(i) - 2 * slope));
  const sum = sumByBlock(blockStart, (i) => hunger(i) * net(i)) - slope * discount * house.slopeSum;
  const variance = Math.max(squares - (sum * sum) / states, 0) / (states - 1) / (denominator * denominator);
  return Math.sqrt(variance / states);
}
