import fc from 'fast-check';
import { EngineInputError } from '../model/refusal';
import { calibrate, type CalibratedHouse, type PastDeal } from '.';
import { FittedPremiums } from './fitted';
import { minimise } from './minimise';

const STATES = 4000;
/** A fixed walk over [0, 1). */
const spread = (n: number, step = 0.6180339887498949): number => (n * step) % 1;

/** A house that loses up to half of its capital, heavily skewed. */
const house: CalibratedHouse = { capital: Float64Array.from({ length: STATES }, (_unused, s) => 1.08 - 0.5 * spread(s + 1) ** 12), floor: 0.25, risklessRate: 0.03 };

/** Deals that pay in the leaner share of years, in part by chance of their own. */
function deal(name: string, share: number, observedPremium = 1, over: Partial<PastDeal> = {}): PastDeal {
  const payoff = Float64Array.from({ length: STATES }, (_unused, s) => (0.7 * spread(s + 1) + 0.3 * spread(s + 1, 0.7548776662466927) > 1 - share ? 10 : 0));
  return { name, payoff, reinstatement: payoff.map((z) => z / 10), deductions: 0.12, reinstatementDeductions: 0.01, lossAdjustment: 0.02, fixedExpense: 0.01, observedPremium, ...over };
}
const SHARES = [0.3, 0.15, 0.06, 0.02];

function dealsAt(riskAversion: number, noise: (d: number) => number = () => 0): PastDeal[] {
  const blank = SHARES.map((share, d) => deal(`deal ${d + 1}`, share));
  const premiums = new FittedPremiums(blank, house).at(riskAversion);
  return blank.map((one, d) => ({ ...one, observedPremium: (premiums[d] ?? 0) * Math.exp(noise(d)) }));
}

describe('calibration of risk aversion', () => {
  it.each([0.5, 1, 6, 12, 25])('finds the %p that the premiums were made with', (riskAversion) => {
    const found = calibrate(dealsAt(riskAversion), house);
    expect(Math.abs(found.riskAversion / riskAversion - 1)).toBeLessThan(1e-6);
    expect(found.deals.every(({ residual }) => Math.abs(residual) < 1e-6)).toBe(true);
    expect(found.profile).toHaveLength(31);
    const mean = house.capital.reduce((sum, k) => sum + found.discount * Math.max(k, 0.25) ** -found.riskAversion, 0) / STATES;
    expect(mean * 1.03).toBeCloseTo(1, 9);
  });

  it('holds the true one in its interval where premiums scatter, and fits one deal exactly without an interval', () => {
    const noise = [0.05, -0.04, 0.03, -0.05];
    const found = calibrate(dealsAt(6, (d) => noise[d] ?? 0), house);
    expect(found.interval?.from).toBeLessThan(6);
    expect(found.interval?.to).toBeGreaterThan(6);
    expect(found.objective).toBeLessThanOrEqual(Math.min(...found.profile.map(({ objective }) => objective)));
    const single = calibrate(dealsAt(6).slice(2, 3), house);
    expect(single.interval).toBeNull();
    expect(single.riskAversion).toBeCloseTo(6, 5);
  });

  it('does not depend on the unit of money, nor on the order of the deals', () => {
    const noise = [0.05, -0.04, 0.03, -0.05];
    const deals = dealsAt(6, (d) => noise[d] ?? 0);
    const found = calibrate(deals, house).riskAversion;
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1e6, noNaN: true }), (unit) => {
        const changed = deals.map((one) => ({ ...one, payoff: one.payoff.map((z) => z * unit), fixedExpense: one.fixedExpense * unit, observedPremium: one.observedPremium * unit }));
        expect(Math.abs(calibrate(changed, house).riskAversion - found)).toBeLessThan(1e-6);
      }),
      { numRuns: 10, seed: 7 },
    );
    expect(Math.abs(calibrate([...deals].reverse(), house).riskAversion - found)).toBeLessThan(1e-7);
  });

  it('takes the least of two minima', () => {
    const bent = (x: number): number => Math.min((x - 3) ** 2 + 0.5, (x - 21.37) ** 2);
    expect(minimise(bent, 20, 23, 1e-9).x).toBeCloseTo(21.37, 6);
    expect(minimise((x) => Math.abs(x - 0.1), -5, 5, 1e-10).x).toBeCloseTo(0.1, 8);
  });

  const none = deal('none', 0.3, 1, { payoff: new Float64Array(STATES), reinstatement: new Float64Array(STATES) });
  const always = deal('always', 0.3, 1, { payoff: new Float64Array(STATES).fill(10), reinstatement: new Float64Array(STATES) });
  it.each<[string, PastDeal[], RegExp]>([
    ['no deals', [], /number of deals is 0/],
    ['none that pays', [none], /None of the deals pays/],
    ['one that pays the same in every year', [always], /cannot tell/],
    ['deals as cheap as at no risk aversion', dealsAt(0).map((one) => ({ ...one, observedPremium: one.observedPremium * 0.7 })), /lower end of the range/],
    ['a premium of 0', [deal('free', 0.3, 0)], /premium observed is 0/],
    ['payoffs of another grid', [{ ...deal('short', 0.3), payoff: new Float64Array(3) }], /number of states/],
  ])('refuses %s, in words', (_what, deals, words) => {
    expect(() => calibrate(deals, house)).toThrow(words);
    expect(() => calibrate(deals, house)).toThrow(EngineInputError);
  });

  it('refuses deals dearer than any risk aversion of the range', () => {
    expect(() => calibrate(dealsAt(12), house, { most: 8 })).toThrow(/upper end of the range/);
    expect(() => calibrate(dealsAt(12), house, { least: 9, most: 8 })).toThrow(/range of risk aversion/i);
  });

  it('refuses a house whose capital never changes', () => {
    expect(() => calibrate(dealsAt(6), { ...house, capital: new Float64Array(STATES).fill(1) })).toThrow(/cannot tell/);
  });
});
