import { BLOCK_STATES, type HouseBasis } from '../model/inputs';
import type { Prepared } from '../model/prepare';
import { EngineInputError } from '../model/refusal';
import { addState, combined, noMoments, type CommonMoments } from './common-change';
import { impliedRate } from './implied-rate';
import { marginalUtility, type Preferences } from './utility';

/** The house in every state. */
export interface House {
  readonly states: number;
  readonly preferences: Preferences;
  /** Capital at the end of the state as a share of opening capital. */
  readonly capital: Float64Array;
  /** u′(k). Today's value of one unit paid in the state is m = discount × slope. */
  readonly slope: Float64Array;
  /** β. */
  readonly discount: number;
  /** Σ u′ and Σ u′². */
  readonly slopeSum: number;
  readonly slopeSquares: number;
  /** E[m]. */
  readonly sureValue: number;
  readonly risklessRate: number;
  /** sd(m)/E[m], the largest Sharpe ratio that the preferences allow. */
  readonly largestSharpeRatio: number;
  /** Share of E[m] from states at or below the floor. */
  readonly floorShare: number;
  /** (Σm)²/Σm². */
  readonly effectiveStates: number;
  /** The book's premium net of brokerage, taxes and expenses, attritional loss and outward cost, house currency. */
  readonly netPremium: number;
  /** States with less capital than this stand apart in sums over many states: they are near the floor. */
  readonly nearBelow: number;
  readonly near: readonly number[];
  /** Moments of all other states. */
  readonly common: CommonMoments;
}

/** Π: premium of the book at inception, net of what is paid out of it, house currency. */
export function netBookPremium(prepared: Prepared): number {
  const { basis } = prepared.inputs;
  let premium = 0;
  for (const contract of prepared.book) {
    contract.layers.forEach((layer, l) => {
      const kept = 1 - layer.brokerage - basis.taxes - basis.variableExpense;
      premium += layer.line * (contract.premiums[l] ?? 0) * kept * contract.toHouseCurrency;
    });
    premium -= basis.fixedExpensePerContract;
  }
  return premium - basis.attritionalAndOutward;
}

/** Capital share of a state without any catastrophe loss. */
function lossFreeCapital(basis: HouseBasis, netPremium: number, risklessRate: number): number {
  return 1 + (basis.returnOnAssets ?? risklessRate) + (netPremium * (1 + risklessRate)) / basis.capital;
}

/** What one block's states add to the house. */
export interface HousePart {
  readonly slopeSum: number;
  readonly slopeSquares: number;
  /** Σ (u′ − u′ of a loss-free state)², about which the scatter is summed without cancellation. */
  readonly shiftedSquares: number;
  readonly onFloor: number;
  /** States at or below the floor. */
  readonly floored: number;
  readonly near: readonly number[];
  readonly common: CommonMoments;
}

/** The riskless rate: given, or where the discount is stated the one that it implies, for the rate also moves capital. */
export function risklessRateOf(prepared: Prepared, bookLoss: Float64Array): number {
  const { basis } = prepared.inputs;
  if (basis.discounting.mode === 'anchored') return basis.discounting.risklessRate;
  const { discountFactor } = basis.discounting;
  const netPremium = netBookPremium(prepared);
  const preferences = { riskAversion: basis.riskAversion, floor: basis.floor };
  return impliedRate((rate) => {
    const free = lossFreeCapital(basis, netPremium, rate);
    let total = 0;
    for (let from = 0; from < bookLoss.length; from += BLOCK_STATES) {
      let sum = 0;
      const to = Math.min(from + BLOCK_STATES, bookLoss.length);
      for (let s = from; s < to; s += 1) sum += marginalUtility(free - (bookLoss[s] ?? 0) / basis.capital, preferences);
      total += sum;
    }
    return 1 / ((discountFactor * total) / bookLoss.length) - 1 - rate;
  });
}

const LEAST_SQUARES = 1e-200;

function nearBelowOf(floor: number): number {
  return Math.max(1.25 * floor, 0.5);
}

/** Fills capital and u′ of one block's states from the book's loss, and sums what the house needs of them. */
export function housePart(prepared: Prepared, columns: { bookLoss: Float64Array; capital: Float64Array; slope: Float64Array }, index: number, risklessRate: number): HousePart {
  const { basis } = prepared.inputs;
  const { bookLoss, capital, slope } = columns;
  const preferences = { riskAversion: basis.riskAversion, floor: basis.floor };
  const free = lossFreeCapital(basis, netBookPremium(prepared), risklessRate);
  const freeSlope = marginalUtility(free, preferences);
  const nearBelow = nearBelowOf(basis.floor);
  const common = noMoments();
  const near: number[] = [];
  let [slopeSum, slopeSquares, shiftedSquares, onFloor, floored] = [0, 0, 0, 0, 0];
  const from = index * BLOCK_STATES;
  const to = Math.min(from + BLOCK_STATES, bookLoss.length);
  for (let s = from; s < to; s += 1) {
    const loss = bookLoss[s] ?? 0;
    const k = free - loss / basis.capital;
    const u = loss === 0 ? freeSlope : marginalUtility(k, preferences);
    capital[s] = k;
    slope[s] = u;
    slopeSum += u;
    slopeSquares += u * u;
    shiftedSquares += (u - freeSlope) * (u - freeSlope);
    if (k <= basis.floor) {
      onFloor += u;
      floored += 1;
    }
    if (k < nearBelow) near.push(s);
    else addState(common, k, u);
  }
  return { slopeSum, slopeSquares, shiftedSquares, onFloor, floored, near, common };
}

/**
 * Joins the blocks' parts, in order, to the house: m = β·max(k, φ)^(−γ). Anchored, β makes a sure unit cost
 * 1/(1 + riskless rate); stated, β is given. Price is the payoff weighted so: J. H. Cochrane, Asset Pricing (2005), chapter 1.
 * @throws EngineInputError where every state is at or below the floor, or where u′ is too small for its square to be a number
 */
export function houseOf(prepared: Prepared, columns: { capital: Float64Array; slope: Float64Array }, parts: readonly HousePart[], risklessRate: number): House {
  const { basis, grid } = prepared.inputs;
  const { states } = grid;
  let [slopeSum, slopeSquares, shiftedSquares, onFloor, floored] = [0, 0, 0, 0, 0];
  let common = noMoments();
  for (const part of parts) {
    slopeSum += part.slopeSum;
    slopeSquares += part.slopeSquares;
    shiftedSquares += part.shiftedSquares;
    onFloor += part.onFloor;
    floored += part.floored;
    common = combined(common, part.common, 1);
  }
  if (floored === states && basis.riskAversion > 0) {
    throw new EngineInputError('In every simulated year the book alone leaves the house at or below its floor: look at its capital, its floor and its book.');
  }
  // Squares of payoffs are still to be multiplied to these.
  if (!(slopeSquares > LEAST_SQUARES)) {
    throw new EngineInputError('The house has so much more capital at the end of every year than at its beginning that its hunger is beyond all numbers: look at its capital and at the premium of its book.');
  }
  const { discounting } = basis;
  const discount = discounting.mode === 'anchored' ? states / ((1 + risklessRate) * slopeSum) : discounting.discountFactor;
  const preferences = { riskAversion: basis.riskAversion, floor: basis.floor };
  const netPremium = netBookPremium(prepared);
  const offFree = slopeSum / states - marginalUtility(lossFreeCapital(basis, netPremium, risklessRate), preferences);
  const scatter = Math.max(shiftedSquares / states - offFree * offFree, 0);
  return {
    states,
    preferences,
    ...columns,
    discount,
    slopeSum,
    slopeSquares,
    sureValue: (discount * slopeSum) / states,
    risklessRate,
    largestSharpeRatio: Math.sqrt(scatter) / (slopeSum / states),
    floorShare: onFloor / slopeSum,
    effectiveStates: (slopeSum * slopeSum) / slopeSquares,
    netPremium,
    nearBelow: nearBelowOf(basis.floor),
    near: parts.flatMap((part) => part.near),
    common,
  };
}
