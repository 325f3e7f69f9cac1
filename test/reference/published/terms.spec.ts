import {
  periodsByChoice,
  periodsFromFirstLoss,
  type DatedLoss,
} from '../../../worker/engine/layers/hours-clause';
import { occurrenceRecovery, rateOnLine, reinstatementShare } from '../../../worker/engine/layers/payoff';
import { signedLines } from '../../../worker/engine/layers/signing';
import { adjustPremium } from '../../../worker/engine/premiums/adjustment';
import { purePremium } from '../../../worker/engine/premiums/pure';
import { inventedLayer } from '../../../worker/engine/testing/invented';
import { apart, premiumWithoutLoads } from './simulate';

const exact = (value: number) => expect.closeTo(value, 9) as number;

/** Exhaustion, reinstatements, annual deductibles, rate on line: worker/engine/layers/payoff.spec.ts. */
describe('published terms of a layer', () => {
  it('adjusts premium and reinstatement premium (read): CII, M97 Reinsurance (2018/19), example 5.16', () => {
    const layer = { limit: 100_000, annualDeductible: 0, reinstatements: [1] };
    const recovery = occurrenceRecovery(150_000, layer.limit, 100_000);
    expect(recovery).toBe(50_000);
    const terms = { minimumPremium: 10_000, depositPremium: 10_000, rate: 0.01 };
    expect(adjustPremium(terms, 1_200_000, reinstatementShare(recovery, layer))).toEqual({
      depositReinstatementPremium: exact(5_000),
      adjustedPremium: exact(12_000),
      finalReinstatementPremium: exact(6_000),
      reinstatementDue: exact(1_000),
      // Own arithmetic.
      premiumDue: exact(2_000),
      totalDue: exact(3_000),
    });
  });

  it('finds the loss in a 15m xs 2.5m layer, and its rate on line (read): IFoA, SP7, April 2019, question 8', () => {
    expect(occurrenceRecovery(15, 15, 2.5)).toBe(12.5);
    expect(rateOnLine(1.2, 15)).toBeCloseTo(0.08, 12);
  });
});

describe('an hours clause of 72 hours, 5m xs 2m (read): R. Mims, reinsurance glossary', () => {
  const at = (day: number, hour: number, minute: number, amount: number): DatedLoss => ({
    minute: (24 * day + hour) * 60 + minute,
    amount,
  });
  const september = [
    at(1, 2, 45, 1),
    at(2, 16, 2, 0.8),
    at(3, 9, 9, 0.95),
    at(4, 1, 45, 1.2),
    at(4, 20, 45, 1.5),
  ];
  const recovered = (amount: number): number => occurrenceRecovery(amount, 5, 2);

  it('from the first loss counts 3.95m and recovers 1.95m', () => {
    const periods = periodsFromFirstLoss(september, 72);
    expect(periods.map(({ amount }) => amount)).toEqual([exact(3.95), exact(1.5)]);
    expect(periods.map(({ amount }) => recovered(amount))).toEqual([exact(1.95), 0]);
  });

  it('at the cedant’s choice counts 4.45m and recovers 2.45m (own arithmetic)', () => {
    const periods = periodsByChoice(september, 72, recovered);
    expect(periods).toEqual([{ start: september[1]?.minute, amount: exact(4.45) }]);
    expect(recovered(periods[0]?.amount ?? 0)).toBeCloseTo(2.45, 9);
  });
});

describe('signing down', () => {
  it('25% on a slip written to 125% signs 20% (read): market glossaries', () => {
    const signed = signedLines(
      [25, 40, 60].map((written) => ({ written: written / 100, toStand: false })),
      1,
    );
    expect(signed).toEqual([exact(0.2), exact(0.32), exact(0.48)]);
  });

  it('lines to stand are not signed down (memory): market glossaries', () => {
    const lines = [0.25, 0.4, 0.6].map((written, i) => ({ written, toStand: i === 0 }));
    expect(signedLines(lines, 1)).toEqual([0.25, exact(0.3), exact(0.45)]);
  });
});

describe('the pure premium with paid reinstatements (memory): B. Sundt (1991), every loss a full limit, N Poisson', () => {
  /** Rate, number of reinstatements at 100%, premium at a limit of 1 (own arithmetic, 1e-9). */
  const CASES = [
    [0.1, 1, 0.0911658449],
    [0.1, 2, 0.0909186299],
    [0.5, 1, 0.3471001024],
    [0.5, 2, 0.3356945304],
  ] as const;

  it.each(CASES)('from the law of the counts: rate %p, %p reinstatements', (rate, number, premium) => {
    const counts = Array.from({ length: 30 }, (_unused, n) => n);
    let p = Math.exp(-rate);
    const probabilities = counts.map((n) => (n === 0 ? p : (p *= rate / n)));
    const terms = { limit: 1, annualDeductible: 0, reinstatements: new Array<number>(number).fill(1) };
    expect(purePremium(probabilities, counts, terms)).toBeCloseTo(premium, 9);
  });

  it.each(CASES)(
    'as the engine’s marginal premium, within 4 standard errors: rate %p, %p reinstatements',
    (rate, number, premium) => {
      const model = { name: `full limits ${rate}`, events: [{ rate, loss: 1 }] };
      const layer = inventedLayer('full', 1, 0, { reinstatements: new Array<number>(number).fill(1) });
      const { value, standardError } = premiumWithoutLoads(model, layer, 98_304);
      expect(standardError / premium).toBeLessThan(0.01);
      const priced = { what: 'marginal premium', simulated: value, standardError, published: premium };
      expect(apart([priced])).toEqual([]);
    },
  );
});
