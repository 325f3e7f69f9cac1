import fc from 'fast-check';
import { paybackYears, rateOnLine, recoveriesInOrder, reinstatementShare, yearlyCover, yearlyPayoff } from './payoff';

const terms = (limit: number, reinstatements: number[], annualDeductible = 0) => ({ limit, reinstatements, annualDeductible });

describe('terms of a layer', () => {
  it('exhausts in order: CII, M97 Reinsurance (2018/19), example 5.15', () => {
    expect(recoveriesInOrder([2.35, 3, 4, 3], 2, terms(2, [1]))).toEqual([0.35, 1, 2, 0.65].map((x) => expect.closeTo(x, 12) as number));
  });

  it('charges a partial reinstatement pro rata: IFoA, SP7, April 2019, question 8', () => {
    const layer = terms(15, [1]);
    const payoff = yearlyPayoff(12.5, layer);
    const premium = 0.08 * 15;
    expect(payoff).toBe(12.5);
    expect(premium).toBeCloseTo(1.2, 12);
    expect(premium * reinstatementShare(payoff, layer)).toBeCloseTo(1, 12);
  });

  it('takes the annual deductible first: IFoA, September 2008, tutors’ answer', () => {
    expect(recoveriesInOrder([1.5, 1.5, 1.5, 1.5, 1.5], 1, terms(1, [1, 1, 1, 1], 2))).toEqual([0, 0, 0, 0, 0.5]);
  });

  it.each([
    [[175], [75], 7.5],
    [[250, 150], [100, 50], 10],
    [[200, 110, 200], [100, 10, 90], 10],
  ])('recovers and charges as a public teaching note has it: losses %p', (losses, recovered, premium) => {
    const layer = terms(100, [1]);
    const recoveries = recoveriesInOrder(losses, 100, layer);
    expect(recoveries).toEqual(recovered);
    expect(10 * reinstatementShare(recoveries.reduce((a, b) => a + b, 0), layer)).toBeCloseTo(premium, 12);
  });

  it('knows rate on line and payback: IRMI glossary', () => {
    expect(rateOnLine(2, 10)).toBeCloseTo(0.2, 12);
    expect(paybackYears(2, 10)).toBe(5);
    expect(rateOnLine(0.5, 10)).toBeCloseTo(0.05, 12);
    expect(paybackYears(0.5, 10)).toBe(20);
  });

  it('never pays more than its cover, never charges more than its reinstatements, never falls with the loss', () => {
    const amount = fc.double({ min: 0, max: 1e9, noNaN: true });
    const price = fc.double({ min: 0, max: 5, noNaN: true });
    fc.assert(
      fc.property(amount, amount, fc.double({ min: 1e-3, max: 1e9, noNaN: true }), amount, fc.array(price, { maxLength: 5 }), (a, b, limit, deductible, prices) => {
        const layer = terms(limit, prices, deductible);
        const [less, more] = [Math.min(a, b), Math.max(a, b)].map((sum) => yearlyPayoff(sum, layer)) as [number, number];
        expect(less).toBeGreaterThanOrEqual(0);
        expect(more).toBeGreaterThanOrEqual(less);
        expect(more).toBeLessThanOrEqual(yearlyCover(layer));
        const share = reinstatementShare(more, layer);
        expect(share).toBeGreaterThanOrEqual(reinstatementShare(less, layer));
        expect(share).toBeLessThanOrEqual(prices.reduce((sum, p) => sum + p, 0) * (1 + 1e-12));
      }),
    );
  });
});
