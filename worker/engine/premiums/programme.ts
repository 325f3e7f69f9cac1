import type { House } from '../house/house';
import { marginalUtility, utilityGain, type Preferences } from '../house/utility';
import { sumStates } from '../measures/sums';
import { BLOCK_STATES } from '../model/inputs';
import type { Deal } from './deal';
import { capitalChange } from './walk-away';

/** Gauss–Legendre nodes and weights of eight points on 0..1 (M. Abramowitz, I. A. Stegun, table 25.4). */
const NODES = [
  [0.019855071751231884, 0.05061426814518813],
  [0.10166676129318663, 0.11119051722668724],
  [0.2372337950418355, 0.15685332293894363],
  [0.4082826787521751, 0.18134189168918100],
  [0.5917173212478249, 0.18134189168918100],
  [0.7627662049581645, 0.15685332293894363],
  [0.8983332387068134, 0.11119051722668724],
  [0.9801449282487681, 0.05061426814518813],
] as const;

export interface ProgrammeWalkAway {
  /** Premium of each layer for 100%, contract currency. */
  readonly layers: readonly number[];
  /** The house's share, Σ line × premium, contract currency. */
  readonly total: number;
}

function totalChange(deals: readonly Deal[], house: House, premiums: readonly number[]): Float64Array {
  const change = new Float64Array(house.states);
  deals.forEach((deal, l) => {
    const premium = premiums[l] ?? 0;
    for (let s = 0; s < change.length; s += 1) change[s] = (change[s] ?? 0) + capitalChange(deal, house, s, premium);
  });
  return change;
}

/** ∫₀¹ E[m_t·f] dt for f = 1, and for Z and ρ of each layer; m_t = u′(k + t·change). */
function pathValues(deals: readonly Deal[], house: House, change: Float64Array, preferences: Preferences) {
  const { states, capital } = house;
  const weight = new Float64Array(states);
  for (let s = 0; s < states; s += 1) {
    const k = capital[s] ?? 0;
    const c = change[s] ?? 0;
    let sum = 0;
    for (const [t, w] of NODES) sum += w * marginalUtility(k + t * c, preferences);
    weight[s] = sum;
  }
  const sure = sumStates(states, (s) => weight[s] ?? 0);
  return {
    sure,
    payoffs: deals.map((deal) => sumStates(states, (s) => (weight[s] ?? 0) * (deal.payoff[s] ?? 0))),
    reinstatements: deals.map((deal) => sumStates(states, (s) => (weight[s] ?? 0) * (deal.reinstatement[s] ?? 0))),
  };
}

function gainOf(change: Float64Array, house: House, preferences: Preferences): number {
  let total = 0;
  for (let from = 0; from < house.states; from += BLOCK_STATES) {
    const to = Math.min(from + BLOCK_STATES, house.states);
    let sum = 0;
    for (let s = from; s < to; s += 1) sum += utilityGain(house.capital[s] ?? 0, change[s] ?? 0, preferences);
    total += sum;
  }
  return total / house.states;
}

const MOST_ROUNDS = 30;

/**
 * Walk-away of all layers written together. Each layer's premium is the one at which its own net payoff is worth nothing
 * along the programme scaled from 0 to 1, ∫₀¹ E[m_t · net payoff] dt = 0 with m_t from the capital when t of the programme
 * is written (the allocation of R. J. Aumann and L. S. Shapley, Values of Non-Atomic Games, 1974). Since the integral of
 * the sum is E u(k + change) − E u(k), the parts add up to a programme on which the house neither gains nor loses; what
 * the quadrature leaves of it is taken off by one common factor.
 */
export function programmeWalkAway(deals: readonly Deal[], house: House, preferences: Preferences, start: readonly number[]): ProgrammeWalkAway {
  let premiums = [...start];
  for (let round = 0; round < MOST_ROUNDS; round += 1) {
    const values = pathValues(deals, house, totalChange(deals, house, premiums), preferences);
    const next = deals.map((deal, l) => {
      const payoff = (values.payoffs[l] ?? 0) / values.sure;
      const reinstatement = (values.reinstatements[l] ?? 0) / values.sure;
      const cost = payoff * (1 + deal.lossAdjustment) + deal.fixedExpense / house.sureValue / deal.layer.line;
      return cost / ((1 - deal.deductions) / house.sureValue + (1 - deal.reinstatementDeductions) * reinstatement);
    });
    const moved = Math.max(...next.map((p, l) => Math.abs(p - (premiums[l] ?? 0)) / Math.max(p, 1e-300)));
    premiums = next;
    if (moved < 1e-11) break;
  }
  premiums = scaled(deals, house, preferences, premiums);
  return { layers: premiums, total: deals.reduce((sum, deal, l) => sum + deal.layer.line * (premiums[l] ?? 0), 0) };
}

/** Multiplies all premiums by the factor at which the programme's expected gain is 0, by the secant method. */
function scaled(deals: readonly Deal[], house: House, preferences: Preferences, premiums: readonly number[]): number[] {
  const at = (factor: number): number => gainOf(totalChange(deals, house, premiums.map((p) => p * factor)), house, preferences);
  let [low, high] = [1, 1 + 1e-6];
  let [gainLow, gainHigh] = [at(low), at(high)];
  for (let step = 0; step < 20 && gainHigh !== gainLow; step += 1) {
    const next = high - (gainHigh * (high - low)) / (gainHigh - gainLow);
    [low, gainLow] = [high, gainHigh];
    if (Math.abs(next - high) < 1e-14) break;
    high = next;
    gainHigh = at(high);
  }
  return premiums.map((p) => p * high);
}
