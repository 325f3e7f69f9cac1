import exp from '@stdlib/math-base-special-exp';
import ln from '@stdlib/math-base-special-ln';
import type { House } from '../house/house';
import { marginalUtility, utilityGain, type Preferences } from '../house/utility';
import { moments, type Estimate } from '../measures/sums';
import { BLOCK_STATES } from '../model/inputs';
import type { Deal } from './deal';

/** Change of the house's capital share in a state for each unit of premium, at the deal's line. */
function perPremium(deal: Deal, house: House, state: number): number {
  const kept = (1 - deal.deductions) / house.sureValue + (1 - deal.reinstatementDeductions) * (deal.reinstatement[state] ?? 0);
  return deal.layer.line * kept * deal.toCapitalShare;
}

/** Change that comes whatever the premium: the payoff with its adjustment, and the fixed expense at the year's end. */
function whateverPremium(deal: Deal, house: House, state: number): number {
  const payoff = deal.layer.line * (deal.payoff[state] ?? 0) * (1 + deal.lossAdjustment);
  return -(payoff + deal.fixedExpense / house.sureValue) * deal.toCapitalShare;
}

/** Capital change of a deal in a state at a premium for 100%. */
export function capitalChange(deal: Deal, house: House, state: number, premium: number): number {
  return premium * perPremium(deal, house, state) + whateverPremium(deal, house, state);
}

/** E[u(k + change) − u(k)] and its derivative in the premium. */
function expectedGain(deal: Deal, house: House, preferences: Preferences, premium: number): { gain: number; slope: number } {
  const { states, capital } = house;
  const power = 1 - preferences.riskAversion;
  let gain = 0;
  let slope = 0;
  for (let from = 0; from < states; from += BLOCK_STATES) {
    const to = Math.min(from + BLOCK_STATES, states);
    let blockGain = 0;
    let blockSlope = 0;
    for (let s = from; s < to; s += 1) {
      const k = capital[s] ?? 0;
      const rate = perPremium(deal, house, s);
      const change = premium * rate + whateverPremium(deal, house, s);
      const gained = utilityGain(k, change, preferences);
      const end = k + change;
      blockGain += gained;
      // Above the floor u′ follows from the gain: end^(1−γ) = k^(1−γ) + (1−γ)·gain saves an exponential a state.
      blockSlope += rate * (power !== 0 && k >= preferences.floor && end >= preferences.floor
        ? (exp(power * ln(k)) + power * gained) / end
        : marginalUtility(end, preferences));
    }
    gain += blockGain;
    slope += blockSlope;
  }
  return { gain: gain / states, slope: slope / states };
}

const MOST_STEPS = 100;

/**
 * Walk-away premium of a layer at its written line, for 100%: the one at which the house is as well off as not writing,
 * E u(k + change) = E u(k). The gain is concave and rising in the premium, so Newton's method from the marginal premium,
 * where it is not above 0, comes up to the root without passing it.
 * Source: the principle of equivalent utility, N. L. Bowers et al., Actuarial Mathematics (1997), chapter 1.
 */
export function walkAwayPremium(deal: Deal, house: House, preferences: Preferences, marginal: number): Estimate {
  let premium = marginal;
  let slope = 1;
  for (let step = 0; step < MOST_STEPS; step += 1) {
    const at = expectedGain(deal, house, preferences, premium);
    slope = at.slope;
    const move = at.gain / at.slope;
    premium -= move;
    if (Math.abs(move) <= 1e-12 * Math.abs(premium)) break;
  }
  const spread = moments(house.states, (s) => utilityGain(house.capital[s] ?? 0, capitalChange(deal, house, s, premium), preferences));
  return { value: premium, standardError: spread.standardError / slope };
}
