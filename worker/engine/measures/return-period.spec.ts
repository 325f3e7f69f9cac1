import fc from 'fast-check';
import { chanceWithin, returnPeriodOf } from './return-period';

describe('a return period', () => {
  it('and a chance in a span of years are inverses', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1.01, max: 1e7, noNaN: true }),
        fc.integer({ min: 1, max: 50 }),
        (period, years) => {
          const chance = chanceWithin(years, 1 / period);
          fc.pre(chance < 0.999);
          expect(Math.abs(returnPeriodOf(chance, years) / period - 1)).toBeLessThan(1e-10);
        },
      ),
    );
  });

  it('of one year is one over its probability; the sure and the impossible stay so', () => {
    expect(returnPeriodOf(0.004, 1)).toBeCloseTo(250, 10);
    expect(chanceWithin(7, 1)).toBe(1);
    expect(Math.abs(chanceWithin(7, 0))).toBe(0);
  });

  it('refuses what is no probability or no span, in words', () => {
    expect(() => chanceWithin(30, 1.1)).toThrow('yearly probability is 1.1; it must be from 0 to 1');
    expect(() => chanceWithin(0, 0.1)).toThrow('span of years is 0; it must be above 0');
    expect(() => returnPeriodOf(0, 10)).toThrow('chance is 0; it must be above 0 and below 1');
  });
});
