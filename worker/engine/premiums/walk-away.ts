import type { House } from '../house/house';
import { IdleStates } from '../house/idle-states';
import { SmallGain } from '../house/small-gain';
import { slopeAfter } from '../house/utility';
import type { Estimate } from '../measures/sums';
import { EngineInputError } from '../model/refusal';
import { capitalEffect, type Deal } from './deal';

/** A step multiplies a lean year's capital by 1 + 1/γ at least: from a low floor and with much aversion hundreds are needed. */
const MOST_STEPS = 5000;

/** Σ [u(k + change) − u(k)] over all states, its derivative in the premium, and the sum of squared gains. */
function totalGain(deal: Deal, house: House, idle: IdleStates, series: SmallGain, premium: number): { gain: number; slope: number; squares: number } {
  const { blockStart, state, payoff, reinstatement } = deal.paying;
  const { capital, slope: slopes, preferences } = house;
  const effect = capitalEffect(deal, house.sureValue);
  let [gain, slope, squares] = [0, 0, 0];
  for (let b = 0; b + 1 < blockStart.length; b += 1) {
    let [blockGain, blockSlope, blockSquares] = [0, 0, 0];
    const to = blockStart[b + 1] ?? 0;
    for (let i = blockStart[b] ?? 0; i < to; i += 1) {
      const s = state[i] ?? 0;
      const k = capital[s] ?? 0;
      const before = slopes[s] ?? 0;
      const rate = effect.ofPremium + effect.ofReinstatement * (reinstatement[i] ?? 0);
      const change = premium * rate + effect.ofPayoff * (payoff[i] ?? 0) + effect.fixed;
      const gained = series.at(k, before, change);
      blockGain += gained;
      blockSquares += gained * gained;
      blockSlope += rate * slopeAfter(k, before, change, gained, preferences);
    }
    gain += blockGain;
    slope += blockSlope;
    squares += blockSquares;
  }
  const rest = idle.gain(premium * effect.ofPremium + effect.fixed);
  return { gain: gain + rest.gain, slope: slope + effect.ofPremium * rest.slope, squares: squares + rest.squares };
}

/**
 * Walk-away premium of a layer at its written line, for 100%: the one at which the house is as well off as not writing,
 * E u(k + change) = E u(k). The gain is concave and rising in the premium, so Newton's method from the marginal premium,
 * where it is not above 0, comes up to the root without passing it.
 * Source: the principle of equivalent utility, N. L. Bowers et al., Actuarial Mathematics (1997), chapter 1.
 * @throws EngineInputError where the line is so large that no premium is found
 */
export function walkAwayPremium(deal: Deal, house: House, marginal: number): Estimate {
  const idle = new IdleStates(house, deal.paying.state);
  const series = new SmallGain(house.preferences);
  let premium = marginal;
  for (let step = 0; ; step += 1) {
    const at = totalGain(deal, house, idle, series, premium);
    const move = at.gain / at.slope;
    premium -= move;
    // Newton's error after a step is of the order of the step's square.
    if (step === MOST_STEPS || !(at.slope > 0)) throw new EngineInputError(`Layer ${deal.layer.key}: no walk-away premium is found at its line, which is far beyond what the house can bear.`);
    if (Math.abs(move) <= 1e-9 * Math.abs(premium)) {
      const spread = Math.sqrt(at.squares / (house.states - 1) / house.states);
      return { value: premium, standardError: (spread * house.states) / at.slope };
    }
  }
}
