import { marginalUtility, type Preferences } from './utility';

/** States of any probabilities, with what one unit paid in each is worth today. */
export interface PricedStates {
  readonly probability: readonly number[];
  /** m(s) = β·max(k, φ)^(−γ). */
  readonly hunger: readonly number[];
  /** p(s)·m(s): today's price of one unit paid in state s alone. */
  readonly statePrice: readonly number[];
  /** p(s)·m(s)/E[m]. */
  readonly pricedProbability: readonly number[];
  /** E[m]: price of one unit for sure. */
  readonly sureValue: number;
  /** 1/E[m] − 1. */
  readonly risklessRate: number;
  /** sd(m)/E[m]. */
  readonly largestSharpeRatio: number;
}

function mean(probability: readonly number[], figure: (state: number) => number): number {
  return probability.reduce((sum, p, s) => sum + p * figure(s), 0);
}

/** Everything that hunger says once it is known, for states of unequal weight; grids never need them, checks do. */
export function pricedStates(probability: readonly number[], hunger: readonly number[]): PricedStates {
  const sureValue = mean(probability, (s) => hunger[s] ?? 0);
  const scatter = mean(probability, (s) => ((hunger[s] ?? 0) - sureValue) * ((hunger[s] ?? 0) - sureValue));
  const statePrice = probability.map((p, s) => p * (hunger[s] ?? 0));
  return {
    probability,
    hunger,
    statePrice,
    pricedProbability: statePrice.map((price) => price / sureValue),
    sureValue,
    risklessRate: 1 / sureValue - 1,
    largestSharpeRatio: Math.sqrt(scatter) / sureValue,
  };
}

/** m(s) = discount·u′(k(s)). */
export function hungerOf(capital: readonly number[], discount: number, preferences: Preferences): number[] {
  return capital.map((k) => discount * marginalUtility(k, preferences));
}

/** E[m·x], with its parts E[m]·E[x] and Cov(m, x). */
export function priceOf(states: PricedStates, payoff: readonly number[]): { price: number; risklessPart: number; covariance: number } {
  const price = states.statePrice.reduce((sum, q, s) => sum + q * (payoff[s] ?? 0), 0);
  const risklessPart = states.sureValue * mean(states.probability, (s) => payoff[s] ?? 0);
  return { price, risklessPart, covariance: price - risklessPart };
}
