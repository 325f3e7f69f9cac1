import type { House } from '../house/house';
import { moments, sumStates, type Estimate } from '../measures/sums';
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

/**
 * Premium of a small line: P = (E[m·Z]·(1 + a) + F/w) / ((1 − q) + (1 − q_R)·E[m·ρ]). The standard error holds E[m] at the
 * riskless price of a sure unit, as anchoring does, by the influence of each state on the ratio.
 */
export function marginalPremium(deal: Deal, house: House): MarginalPremium {
  const { payoff, reinstatement, layer } = deal;
  const { hunger, states, sureValue } = house;
  const payoffValue = sumStates(states, (s) => (hunger[s] ?? 0) * (payoff[s] ?? 0)) / states;
  const reinstatementShareValue = sumStates(states, (s) => (hunger[s] ?? 0) * (reinstatement[s] ?? 0)) / states;
  const meanPayoff = sumStates(states, (s) => payoff[s] ?? 0) / states;
  const fixed = deal.fixedExpense / layer.line;
  const keptReinstatement = 1 - deal.reinstatementDeductions;
  const denominator = 1 - deal.deductions + keptReinstatement * reinstatementShareValue;
  const value = (payoffValue * (1 + deal.lossAdjustment) + fixed) / denominator;
  const slope = (payoffValue * (1 + deal.lossAdjustment) - value * keptReinstatement * reinstatementShareValue) / sureValue;
  const influence = moments(states, (s) => {
    const m = hunger[s] ?? 0;
    const net = (payoff[s] ?? 0) * (1 + deal.lossAdjustment) - value * keptReinstatement * (reinstatement[s] ?? 0);
    return (m * net - slope * m) / denominator;
  });
  const risklessLoss = sureValue * meanPayoff;
  return {
    premium: { value, standardError: influence.standardError },
    payoffValue,
    reinstatementShareValue,
    risklessLoss,
    leanLoad: payoffValue - risklessLoss,
    lossAdjustment: payoffValue * deal.lossAdjustment,
    fixedExpense: fixed,
    brokerageAndExpense: value * deal.deductions,
    reinstatementValue: -keptReinstatement * value * reinstatementShareValue,
  };
}
