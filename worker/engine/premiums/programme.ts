import type { House } from '../house/house';
import { IdleStates } from '../house/idle-states';
import { SmallGain } from '../house/small-gain';
import { slopeAfter } from '../house/utility';
import type { LayerStates } from '../layers/layer-states';
import type { Estimate } from '../measures/sums';
import { EngineInputError } from '../model/refusal';
import { capitalEffect, type CapitalEffect, type Deal } from './deal';

export interface ProgrammeWalkAway {
  /** Premium of each layer for 100%, contract currency. */
  readonly layers: readonly number[];
  /** The house's share, Σ line × premium, contract currency. */
  readonly total: Estimate;
}

/** The states in which any of the deals pays, and each deal's places among them. */
interface PayingStates {
  readonly state: Uint32Array;
  readonly places: readonly Uint32Array[];
}

function placesOf(state: Uint32Array, placeOf: Uint32Array): Uint32Array {
  const places = new Uint32Array(state.length);
  for (let i = 0; i < state.length; i += 1) places[i] = placeOf[state[i] ?? 0] ?? 0;
  return places;
}

function payingStates(deals: readonly Deal[], states: number): PayingStates {
  const placeOf = new Uint32Array(states);
  for (const { paying } of deals) for (const s of paying.state) placeOf[s] = 1;
  let count = 0;
  for (let s = 0; s < states; s += 1) count += placeOf[s] ?? 0;
  const state = new Uint32Array(count);
  let at = 0;
  for (let s = 0; s < states; s += 1) {
    if (placeOf[s] === 0) continue;
    state[at] = s;
    placeOf[s] = at;
    at += 1;
  }
  return { state, places: deals.map(({ paying }) => placesOf(paying.state, placeOf)) };
}

/** Capital change of all deals together in each paying state. */
function changes(into: Float64Array, deals: readonly Deal[], effects: readonly CapitalEffect[], paying: PayingStates, premiums: readonly number[]): number {
  const common = effects.reduce((sum, effect, l) => sum + effect.ofPremium * (premiums[l] ?? 0) + effect.fixed, 0);
  into.fill(common);
  deals.forEach((deal, l) => {
    const effect = effects[l];
    const places = paying.places[l];
    if (effect === undefined || places === undefined) return;
    const { payoff, reinstatement } = deal.paying;
    const back = effect.ofReinstatement * (premiums[l] ?? 0);
    for (let i = 0; i < places.length; i += 1) {
      const at = places[i] ?? 0;
      into[at] = (into[at] ?? 0) + (effect.ofPayoff * (payoff[i] ?? 0) + back * (reinstatement[i] ?? 0));
    }
  });
  return common;
}

/** Σ weight·Z and Σ weight·ρ over a deal's paying states, within each block and the blocks' sums in order. */
function weighted(weight: Float64Array, places: Uint32Array, { blockStart, payoff, reinstatement }: LayerStates): { payoff: number; reinstatement: number } {
  let [totalPayoff, totalReinstatement] = [0, 0];
  for (let b = 0; b + 1 < blockStart.length; b += 1) {
    let [paid, reinstated] = [0, 0];
    const to = blockStart[b + 1] ?? 0;
    for (let i = blockStart[b] ?? 0; i < to; i += 1) {
      const w = weight[places[i] ?? 0] ?? 0;
      paid += w * (payoff[i] ?? 0);
      reinstated += w * (reinstatement[i] ?? 0);
    }
    totalPayoff += paid;
    totalReinstatement += reinstated;
  }
  return { payoff: totalPayoff, reinstatement: totalReinstatement };
}

const MOST_ROUNDS = 1000;
const LEAST_STEP = 1 / 64;

/** Income of all premiums together and with it what reinstatement premiums add in each paying state. */
function rates(into: Float64Array, deals: readonly Deal[], effects: readonly CapitalEffect[], paying: PayingStates, premiums: readonly number[]): number {
  const income = effects.reduce((sum, effect, l) => sum + effect.ofPremium * (premiums[l] ?? 0), 0);
  into.fill(income);
  deals.forEach((deal, l) => {
    const back = (effects[l]?.ofReinstatement ?? 0) * (premiums[l] ?? 0);
    const places = paying.places[l] ?? new Uint32Array(0);
    for (let i = 0; i < places.length; i += 1) {
      const at = places[i] ?? 0;
      into[at] = (into[at] ?? 0) + back * (deal.paying.reinstatement[i] ?? 0);
    }
  });
  return income;
}

function largestMove(from: readonly number[], to: readonly number[]): number {
  return Math.max(...to.map((p, l) => Math.abs(p - (from[l] ?? 0)) / Math.max(p, 1e-300)));
}

/**
 * Walk-away of all layers written together. Each layer's premium is the one at which its own net payoff is worth nothing
 * along the programme scaled from 0 to 1, ∫₀¹ E[m_t · net payoff] dt = 0 with m_t from the capital when t of the programme
 * is written (the allocation of R. J. Aumann and L. S. Shapley, Values of Non-Atomic Games, 1974). Since the integral of
 * the sum is E u(k + change) − E u(k), the parts add up to a programme on which the house neither gains nor loses.
 * @throws EngineInputError where the lines are so large that no premiums are found
 */
export function programmeWalkAway(deals: readonly Deal[], house: House, start: readonly number[]): ProgrammeWalkAway {
  const { capital, slope, sureValue, preferences } = house;
  const paying = payingStates(deals, house.states);
  const idle = new IdleStates(house, paying.state);
  const effects = deals.map((deal) => capitalEffect(deal, sureValue));
  const change = new Float64Array(paying.state.length);
  const weight = new Float64Array(paying.state.length);
  const series = new SmallGain(preferences);
  const rate = new Float64Array(paying.state.length);
  let premiums = [...start];
  let before = Infinity;
  let swings = false;
  let step = 1;
  for (let round = 0; ; round += 1) {
    const common = changes(change, deals, effects, paying, premiums);
    // ∫₀¹ u′(k + t·change) dt = (u(k + change) − u(k))/change: the mean marginal utility along the programme scaled from 0 to 1.
    let total = 0;
    for (let i = 0; i < weight.length; i += 1) {
      const s = paying.state[i] ?? 0;
      const moved = change[i] ?? 0;
      const own = slope[s] ?? 0;
      const mean = moved === 0 ? own : series.at(capital[s] ?? 0, own, moved) / moved;
      weight[i] = mean;
      total += mean;
    }
    const rest = idle.gain(common);
    const sure = total + (common === 0 ? rest.slope : rest.gain / common);
    let next = deals.map((deal, l) => {
      const sums = weighted(weight, paying.places[l] ?? new Uint32Array(0), deal.paying);
      const paid = sums.payoff / sure;
      const reinstated = sums.reinstatement / sure;
      const cost = paid * (1 + deal.lossAdjustment) + deal.fixedExpense / sureValue / deal.layer.line;
      return cost / ((1 - deal.deductions) / sureValue + (1 - deal.reinstatementDeductions) * reinstated);
    });
    let moved = largestMove(premiums, next);
    swings ||= moved > 0.5 * before;
    if (swings) {
      // A programme that can ruin the house: the states' weights swing with the premiums. Then only the shares are taken
      // from the parts, and the whole is moved by Newton's method along them.
      const income = rates(rate, deals, effects, paying, premiums);
      let [gain, derivative] = [rest.gain, income * rest.slope];
      for (let i = 0; i < weight.length; i += 1) {
        const s = paying.state[i] ?? 0;
        const gained = (weight[i] ?? 0) * (change[i] ?? 0);
        gain += gained;
        derivative += (rate[i] ?? 0) * slopeAfter(capital[s] ?? 0, slope[s] ?? 0, change[i] ?? 0, gained, preferences);
      }
      const whole = income * Math.max(1 - gain / derivative, 0.5);
      const scaled = (wanted: readonly number[]): number[] => {
        const own = effects.reduce((sum, effect, l) => sum + effect.ofPremium * (wanted[l] ?? 0), 0);
        return wanted.map((premium) => (premium * whole) / own);
      };
      next = scaled(next);
      moved = largestMove(premiums, next);
      // Where the shares swing too, only a part of the way.
      if (moved > 0.9 * before) step = Math.max(0.5 * step, LEAST_STEP);
      const from = premiums;
      premiums = scaled(next.map((premium, l) => (1 - step) * (from[l] ?? 0) + step * premium));
    } else premiums = next;
    if (moved < 1e-10) break;
    if (round === MOST_ROUNDS || !(moved < Infinity)) throw new EngineInputError('No walk-away premium of the programme is found: at its lines it is far beyond what the house can bear.');
    before = moved;
  }
  const value = deals.reduce((sum, deal, l) => sum + deal.layer.line * (premiums[l] ?? 0), 0);
  return { layers: premiums, total: { value, standardError: value * errorOfScale(house, deals, effects, paying, idle, premiums) } };
}

/** Standard error of the factor on all premiums at which the expected gain is 0: sd of the gain over its derivative. */
function errorOfScale(house: House, deals: readonly Deal[], effects: readonly CapitalEffect[], paying: PayingStates, idle: IdleStates, premiums: readonly number[]): number {
  const { capital, slope, preferences } = house;
  const change = new Float64Array(paying.state.length);
  const common = changes(change, deals, effects, paying, premiums);
  const rate = new Float64Array(paying.state.length);
  const income = rates(rate, deals, effects, paying, premiums);
  const rest = idle.gain(common);
  const series = new SmallGain(preferences);
  let [squares, derivative] = [rest.squares, income * rest.slope];
  for (let i = 0; i < change.length; i += 1) {
    const s = paying.state[i] ?? 0;
    const [k, before, moved] = [capital[s] ?? 0, slope[s] ?? 0, change[i] ?? 0];
    const gained = series.at(k, before, moved);
    squares += gained * gained;
    derivative += (rate[i] ?? 0) * slopeAfter(k, before, moved, gained, preferences);
  }
  return Math.sqrt(squares) / derivative;
}
