import type { BlockResult } from '../model/blocks';
import { EngineInputError, type HouseBasis } from '../model/inputs';
import type { Prepared } from '../model/prepare';
import { sumStates } from '../measures/sums';
import { marginalUtility } from './utility';

/** The house in every state. */
export interface House {
  readonly states: number;
  /** Capital at the end of the state as a share of opening capital. */
  readonly capital: Float64Array;
  /** The book's catastrophe loss net of reinstatement premiums, house currency. */
  readonly bookLoss: Float64Array;
  /** m(s): today's value of one unit paid in the state. */
  readonly hunger: Float64Array;
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

function fillCapital(capital: Float64Array, bookLoss: Float64Array, basis: HouseBasis, netPremium: number, risklessRate: number): void {
  const start = basis.capital * (1 + (basis.returnOnAssets ?? risklessRate)) + netPremium * (1 + risklessRate);
  for (let s = 0; s < capital.length; s += 1) capital[s] = (start - (bookLoss[s] ?? 0)) / basis.capital;
}

const LOWEST_RATE = -0.5;
const HIGHEST_RATE = 1;
const MOST_STEPS = 100;

/**
 * Root of `excess` between −50% and 100%, by false position with the Illinois halving (M. Dowell, P. Jarratt, BIT 11,
 * 1971): the rate moves capital too, with a slope of γ, so that plain repetition would run away.
 */
function impliedRate(excess: (rate: number) => number): number {
  let [a, b] = [LOWEST_RATE, HIGHEST_RATE];
  let [atA, atB] = [excess(a), excess(b)];
  if (!(atA * atB <= 0)) throw new EngineInputError('The stated discount factor implies no sensible riskless rate on this book.');
  let rate = a;
  for (let step = 0; step < MOST_STEPS; step += 1) {
    const next = b - (atB * (b - a)) / (atB - atA);
    const atNext = excess(next);
    const moved = Math.abs(next - rate);
    rate = next;
    if (atNext === 0 || moved < 1e-14) break;
    if (atNext * atB < 0) [a, atA] = [b, atB];
    else atA /= 2;
    [b, atB] = [next, atNext];
  }
  return rate;
}

/**
 * Capital and hunger of the house in every state: m = β·max(k, φ)^(−γ). Anchored, β makes a sure unit cost
 * 1/(1 + riskless rate); stated, β is given and the riskless rate that it implies is solved for, since the rate also moves
 * capital. Price is the payoff weighted so: J. H. Cochrane, Asset Pricing (2005), chapter 1.
 * @throws EngineInputError where the stated discount implies no riskless rate
 */
export function houseOf(prepared: Prepared, blocks: readonly BlockResult[]): House {
  const { basis, grid } = prepared.inputs;
  const { states } = grid;
  const bookLoss = new Float64Array(states);
  let at = 0;
  for (const block of blocks) {
    bookLoss.set(block.bookLoss, at);
    at += block.states;
  }
  const netPremium = netBookPremium(prepared);
  const preferences = { riskAversion: basis.riskAversion, floor: basis.floor };
  const capital = new Float64Array(states);
  const hunger = new Float64Array(states);
  const meanMarginal = (risklessRate: number): number => {
    fillCapital(capital, bookLoss, basis, netPremium, risklessRate);
    for (let s = 0; s < states; s += 1) hunger[s] = marginalUtility(capital[s] ?? 0, preferences);
    return sumStates(states, (s) => hunger[s] ?? 0) / states;
  };

  let risklessRate: number;
  let discount: number;
  if (basis.discounting.mode === 'anchored') {
    risklessRate = basis.discounting.risklessRate;
    discount = 1 / ((1 + risklessRate) * meanMarginal(risklessRate));
  } else {
    discount = basis.discounting.discountFactor;
    const given = discount;
    risklessRate = impliedRate((rate) => 1 / (given * meanMarginal(rate)) - 1 - rate);
    meanMarginal(risklessRate);
  }
  for (let s = 0; s < states; s += 1) hunger[s] = (hunger[s] ?? 0) * discount;
  const sum = sumStates(states, (s) => hunger[s] ?? 0);
  const sureValue = sum / states;
  const squares = sumStates(states, (s) => (hunger[s] ?? 0) * (hunger[s] ?? 0));
  const scatter = sumStates(states, (s) => {
    const off = (hunger[s] ?? 0) - sureValue;
    return off * off;
  });
  const onFloor = sumStates(states, (s) => ((capital[s] ?? 0) <= basis.floor ? (hunger[s] ?? 0) : 0));
  return {
    states,
    capital,
    bookLoss,
    hunger,
    sureValue,
    risklessRate,
    largestSharpeRatio: Math.sqrt(scatter / states) / sureValue,
    floorShare: onFloor / sum,
    effectiveStates: (sum * sum) / squares,
    netPremium,
  };
}
