import exp from '@stdlib/math-base-special-exp';
import { normalDensity } from '../math/normal';
import { hungerOf, priceOf, pricedStates } from './state-prices';

const power = (riskAversion: number) => ({ riskAversion, floor: 1e-9 });
const SOURCE = 'D. Backus, notes ECON-UB.233, NYU Stern';
const digits = (value: number, places: number) => expect.closeTo(value, places) as number;

describe('price as E[m·x]', () => {
  it(`two states of growth: ${SOURCE}`, () => {
    const growth = [exp(0.02 - 0.035), exp(0.02 + 0.035)];
    const states = pricedStates([0.5, 0.5], hungerOf(growth, 0.99, power(5)));
    expect(growth).toEqual([digits(0.9851, 4), digits(1.0565, 4)]);
    expect(states.hunger).toEqual([digits(1.0671, 4), digits(0.752, 4)]);
    expect(states.sureValue).toBeCloseTo(0.9095, 4);
    expect(1 + states.risklessRate).toBeCloseTo(1.0995, 4);
    const { price, risklessPart, covariance } = priceOf(states, growth);
    expect(price).toBeCloseTo(0.9229, 4);
    expect(growth.map((g) => g / price)).toEqual([digits(1.0675, 4), digits(1.1449, 4)]);
    expect(0.5 * (growth[0] ?? 0) / price + 0.5 * (growth[1] ?? 0) / price - (1 + states.risklessRate)).toBeCloseTo(0.0067, 4);
    expect(states.largestSharpeRatio).toBeCloseTo(0.1732, 4);
    // Own digits.
    expect(risklessPart).toBeCloseTo(0.9284832056, 9);
    expect(covariance).toBeCloseTo(-0.0056273101, 9);
    expect(price).toBeCloseTo(0.9228558955, 9);
  });

  it(`unequal states: ${SOURCE}`, () => {
    const growth = [1, 1.1];
    const states = pricedStates([0.7, 0.3], hungerOf(growth, 0.98, power(5)));
    expect(states.hunger).toEqual([digits(0.98, 4), digits(0.6085, 4)]);
    expect(states.statePrice).toEqual([digits(0.686, 4), digits(0.1826, 4)]);
    expect(states.sureValue).toBeCloseTo(0.8686, 4);
    expect(1 + states.risklessRate).toBeCloseTo(1.1513, 4);
    expect(priceOf(states, growth).price).toBeCloseTo(0.8868, 4);
    expect(states.largestSharpeRatio).toBeCloseTo(0.196, 4);
  });

  it(`given state prices: ${SOURCE}`, () => {
    const third = 1 / 3;
    const states = pricedStates([third, third, third], [1.5, 1, 0.75]);
    expect(states.statePrice).toEqual([digits(1 / 2, 12), digits(1 / 3, 12), digits(1 / 4, 12)]);
    expect(states.pricedProbability).toEqual([digits(0.4615, 4), digits(0.3077, 4), digits(0.2308, 4)]);
    expect(1 + states.risklessRate).toBeCloseTo(0.9231, 4);
    expect(priceOf(states, [1, 2, 3]).price).toBeCloseTo(1.9167, 4);
  });

  /** The standard normal law on an even grid, each point with its density times the step: the trapezoidal rule. */
  const STEP = 1e-4;
  const z = Array.from({ length: 220_001 }, (_unused, i) => -11 + i * STEP);
  const weights = z.map((x) => normalDensity(x) * STEP);

  it('lognormal growth: E[m] = β·exp(−γa + γ²v/2) and the priced law is N(a − γv, v) (own algebra)', () => {
    const [a, v, gamma, beta] = [0.02, 0.0012, 4, 0.97];
    const logs = z.map((x) => a + Math.sqrt(v) * x);
    const states = pricedStates(weights, hungerOf(logs.map((x) => exp(x)), beta, power(gamma)));
    expect(states.sureValue).toBeCloseTo(beta * exp(-gamma * a + (gamma * gamma * v) / 2), 9);
    const pricedMean = states.pricedProbability.reduce((sum, p, s) => sum + p * (logs[s] ?? 0), 0);
    expect(pricedMean).toBeCloseTo(a - gamma * v, 9);
  });

  it('a Poisson number of events: the priced rate is w·exp(γd) (own algebra)', () => {
    const [w, gamma, d] = [0.3, 5, 0.1];
    let p = exp(-w);
    const probability = Array.from({ length: 40 }, (_unused, n) => {
      if (n > 0) p *= w / n;
      return p;
    });
    const states = pricedStates(probability, hungerOf(probability.map((_p, n) => exp(-d * n)), 1, power(gamma)));
    const pricedRate = states.pricedProbability.reduce((sum, q, n) => sum + q * n, 0);
    expect(pricedRate).toBeCloseTo(w * exp(gamma * d), 12);
  });

  it('a layer is a call spread: J. C. Hull, Options, Futures and Other Derivatives (as quoted in public test files)', () => {
    const [spot, rate, sigma, years] = [42, 0.1, 0.2, 0.5];
    for (const gamma of [0.5, 2, 5, 10]) {
      const drift = (rate + gamma * sigma * sigma - 0.5 * sigma * sigma) * years;
      const ends = z.map((x) => spot * exp(drift + sigma * Math.sqrt(years) * x));
      const raw = pricedStates(weights, hungerOf(ends.map((s) => s / spot), 1, power(gamma)));
      const states = pricedStates(weights, raw.hunger.map((m) => (m / raw.sureValue) * exp(-rate * years)));
      expect(priceOf(states, ends.map((s) => Math.max(s - 40, 0))).price).toBeCloseTo(4.759422393, 7);
      expect(priceOf(states, ends.map((s) => Math.max(40 - s, 0))).price).toBeCloseTo(0.808599373, 7);
      // 1e-8 by quadrature, own digits.
      expect(priceOf(states, ends.map((s) => Math.min(Math.max(s - 40, 0), 5))).price).toBeCloseTo(2.7502750483, 7);
    }
  });
});
