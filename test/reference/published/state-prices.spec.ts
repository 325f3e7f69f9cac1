import { normalDensity } from '../../../worker/engine/math/normal';
import {
  hungerOf,
  priceOf,
  pricedStates,
  type PricedStates,
} from '../../../worker/engine/house/state-prices';
import { utilityGain } from '../../../worker/engine/house/utility';
import { normalScores } from './normal-scores';

const power = (riskAversion: number) => ({ riskAversion, floor: 1e-9 });

/** The standard normal law on an even grid, each point with its density times the step: the trapezoidal rule. */
const STEP = 1e-3;
const GRID = Array.from({ length: 22_001 }, (_unused, i) => -11 + i * STEP);
const WEIGHTS = GRID.map((z) => normalDensity(z) * STEP);

interface Market {
  readonly spot: number;
  /** Price of one unit for sure at the end. */
  readonly bond: number;
  /** Standard deviation of ln S at the end. */
  readonly deviation: number;
}

/** Lognormal S whose m ∝ S^(−γ) prices a unit at `bond` and S itself at `spot`, at given normal scores. */
function lognormalMarket(
  market: Market,
  riskAversion: number,
  weights: readonly number[],
  scores: readonly number[],
) {
  const { spot, bond, deviation } = market;
  const drift = -Math.log(bond) + (riskAversion - 0.5) * deviation * deviation;
  const ends = scores.map((z) => spot * Math.exp(drift + deviation * z));
  const raw = hungerOf(
    ends.map((s) => s / spot),
    1,
    power(riskAversion),
  );
  // E[m] = bond, exactly by the lognormal law: E[(S/spot)^(−γ)].
  const sure = Math.exp(-riskAversion * drift + 0.5 * (riskAversion * deviation) ** 2);
  const states = pricedStates(
    weights,
    raw.map((m) => (m / sure) * bond),
  );
  return { states, ends };
}

const call = (strike: number) => (s: number) => Math.max(s - strike, 0);
const priced = (states: PricedStates, ends: readonly number[], payoff: (s: number) => number): number =>
  priceOf(states, ends.map(payoff)).price;

/** Discrete states, growth and events, and the call spread by quadrature: worker/engine/house/state-prices.spec.ts. */
describe('published prices as E[m·x]', () => {
  const RISK_AVERSIONS = [0.5, 2, 5, 10];
  const scores = normalScores(200_000);
  const equally = scores.map(() => 1 / scores.length);

  it('the price-weighted law of lognormal growth has the variance it had (own algebra)', () => {
    const [a, v, gamma] = [0.02, 0.0012, 4];
    const logs = GRID.map((z) => a + Math.sqrt(v) * z);
    const { pricedProbability } = pricedStates(
      WEIGHTS,
      hungerOf(
        logs.map((x) => Math.exp(x)),
        0.97,
        power(gamma),
      ),
    );
    const mean = pricedProbability.reduce((sum, p, s) => sum + p * (logs[s] ?? 0), 0);
    const variance = pricedProbability.reduce((sum, p, s) => sum + p * ((logs[s] ?? 0) - mean) ** 2, 0);
    expect(variance / v).toBeCloseTo(1, 9);
  });

  it.each(RISK_AVERSIONS)(
    'options and a layer, simulated, within 4 standard errors (read): J. C. Hull, Options, Futures and Other Derivatives, as quoted in public test files: γ = %p',
    (gamma) => {
      const market = { spot: 42, bond: Math.exp(-0.1 * 0.5), deviation: 0.2 * Math.sqrt(0.5) };
      const { states, ends } = lognormalMarket(market, gamma, equally, scores);
      const check = (what: string, payoff: (s: number) => number, published: number) => {
        const price = priced(states, ends, payoff);
        const squares =
          ends.reduce((sum, s, i) => sum + ((states.hunger[i] ?? 0) * payoff(s)) ** 2, 0) / ends.length;
        const standardError = Math.sqrt((squares - price * price) / ends.length);
        expect({
          what,
          price,
          standardError,
          published,
          fine: Math.abs(price - published) < 4 * standardError,
        }).toEqual({ what, price, standardError, published, fine: true });
      };
      check('call', call(40), 4.759422393);
      check('put', (s) => Math.max(40 - s, 0), 0.808599373);
      check('layer 5 xs 40 (own digits)', (s) => Math.min(call(40)(s), 5), 2.7502750483);
    },
  );

  it.each(RISK_AVERSIONS)(
    'calls on a lognormal asset beside a bond (read): D. Backus, notes ECON-UB.233, NYU Stern: γ = %p',
    (gamma) => {
      const { states, ends } = lognormalMarket(
        { spot: 100, bond: 0.98, deviation: 0.2 },
        gamma,
        WEIGHTS,
        GRID,
      );
      expect(states.sureValue).toBeCloseTo(0.98, 9);
      expect(priced(states, ends, (s) => s)).toBeCloseTo(100, 7);
      expect(priced(states, ends, call(95))).toBeCloseTo(11.625, 3);
      expect(priced(states, ends, call(105))).toBeCloseTo(6.713, 3);
    },
  );

  it('log utility, payoffs 3, 1, 0 and riskless 1.2 (read): D. G. Luenberger, Investment Science, examples 9.6 to 9.10', () => {
    const venture = [3, 1, 0];
    // The second asset, the venture's residual rights, pays 6 where the venture pays 3 (memory); 1 is the price of each.
    const rights = [6, 0, 0];
    // Best for log utility: one unit of the venture sold short, half a unit of rights, the rest riskless (own arithmetic).
    const capital = venture.map((pays, s) => -pays + 0.5 * (rights[s] ?? 0) + 1.5 * 1.2);
    const states = pricedStates([0.3, 0.4, 0.3], hungerOf(capital, 1, power(1)));
    const twelve = (value: number) => expect.closeTo(value, 12) as number;
    expect(states.statePrice).toEqual([twelve(1 / 6), twelve(1 / 2), twelve(1 / 6)]);
    expect(states.pricedProbability).toEqual([twelve(0.2), twelve(0.6), twelve(0.2)]);
    expect(1 + states.risklessRate).toBeCloseTo(1.2, 12);
    expect(priceOf(states, venture).price).toBeCloseTo(1, 12);
    expect(priceOf(states, rights).price).toBeCloseTo(1, 12);
  });
});

/** ∫ f over 0..1 by Simpson's rule. */
function simpson(f: (t: number) => number, steps = 20_000): number {
  let sum = f(0) + f(1);
  for (let i = 1; i < steps; i += 1) sum += f(i / steps) * (i % 2 === 1 ? 4 : 2);
  return sum / (3 * steps);
}

/** Root of a rising function between two points, by bisection. */
function root(rising: (x: number) => number, low: number, high: number): number {
  let [below, above] = [low, high];
  for (let step = 0; step < 100; step += 1) {
    const middle = 0.5 * (below + above);
    if (rising(middle) < 0) below = middle;
    else above = middle;
  }
  return 0.5 * (below + above);
}

describe('the walk-away principle (memory): N. L. Bowers et al., Actuarial Mathematics, chapter 1', () => {
  const root2 = { riskAversion: 0.5, floor: 1e-12 };
  const wealth = 10;

  it('u = √w, wealth 10, loss uniform on 0 to 10: the most a buyer pays is 50/9', () => {
    // What is left is 10t², of density 2t: no root is taken near 0.
    const uncovered = simpson((t) => 2 * t * utilityGain(wealth, wealth * t * t - wealth, root2));
    const premium = root((price) => uncovered - utilityGain(wealth, -price, root2), 0, 9.9);
    expect(premium / (50 / 9)).toBeCloseTo(1, 9);
  });

  it('and the least a seller of that wealth takes is 5.212972412985849 (own root)', () => {
    const premium = root((price) => simpson((t) => utilityGain(wealth, price - 10 * t, root2), 2000), 1, 9);
    expect(premium / 5.212972412985849).toBeCloseTo(1, 9);
  });

  it('exponential utility .005, loss 0 (.75) else exponential of mean 100: 44.63, the limit of power utility in a vast house', () => {
    // With capital K → ∞ and γ = .005·K, k^(−γ) goes to exp(−.005·(wealth − K)).
    const house = 1e10;
    const vast = { riskAversion: 0.005 * house, floor: 0.5 };
    const gain = (money: number): number => utilityGain(1, money / house, vast) * house;
    const MOST = 8000;
    const premium = root(
      (price) =>
        0.75 * gain(price) +
        0.25 * simpson((t) => MOST * (Math.exp((-MOST * t) / 100) / 100) * gain(price - MOST * t)),
      0,
      200,
    );
    expect(premium).toBeCloseTo(44.63, 2);
    // Own arithmetic, as the moment generating function has it: ln(.75 + .25/(1 − .5))/.005.
    expect(premium / (200 * Math.log(1.25))).toBeCloseTo(1, 6);
  });
});
