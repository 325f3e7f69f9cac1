import { yearlyPayoff } from '../../../worker/engine/layers/payoff';
import { EVENT_CURVE_HELP, eventCurve, yearlyMean } from '../../../worker/engine/measures/event-curve';
import { chanceWithin, returnPeriodOf } from '../../../worker/engine/measures/return-period';
import { apart, compared, comparedShares, valueAtRisk, yearlyLosses } from './simulate';

/** Whole blocks; fewer where counts vary together, which costs the engine more. */
const STATES = 98_304;
const GROUPED_STATES = 32_768;
/** Events whose counts add up to a yearly mean, each loss with its share of it. */
const compound = (mean: number, losses: readonly (readonly [loss: number, share: number])[]) =>
  losses.map(([loss, share]) => ({ rate: mean * share, loss }));

describe('compound distributions, simulated, within 4 standard errors', () => {
  describe('Loss Data Analytics (Open Actuarial Textbooks, 2023)', () => {
    it('geometric counts of mean 4, loss uniform on 1 to 4 (read): examples 5.3.3 and 5.4.1', () => {
      const uniform = [1, 2, 3, 4].map((loss) => [loss, 1 / 4] as const);
      const model = { name: 'geometric 4', events: compound(4, uniform), varianceToMean: 5 };
      const losses = yearlyLosses(model, GROUPED_STATES);
      const shares = comparedShares(losses, [0.2, 0.04, 0.048, 0.0576]);
      expect(apart([...shares, compared('F(3)', losses, (loss) => (loss < 3.5 ? 1 : 0), 0.3456)])).toEqual(
        [],
      );
    });

    it('geometric counts of mean 2, loss 5, 10 or 20 (read): examples 5.3.6 and 5.3.7', () => {
      const events = compound(2, [
        [5, 0.2],
        [10, 0.3],
        [20, 0.5],
      ]);
      const losses = yearlyLosses({ name: 'geometric 2', events, varianceToMean: 3 }, GROUPED_STATES);
      expect(apart([compared('mean', losses, (loss) => loss, 28)])).toEqual([]);
      expect(apart([compared('f(10)', losses, (loss) => (loss === 10 ? 1 : 0), 0.0726)], 0.00005)).toEqual(
        [],
      );
      expect(
        apart([compared('E(S − 15)+', losses, (loss) => Math.max(loss - 15, 0), 18.807)], 0.0005),
      ).toEqual([]);
    });
  });

  describe('SOA/CAS, Exam C sample questions', () => {
    it('Poisson 2, loss 1, 2 or 3, annual deductible 2 costs 2.36 (read): question 99', () => {
      const events = compound(
        2,
        [1, 2, 3].map((loss) => [loss, 1 / 3] as const),
      );
      const losses = yearlyLosses({ name: 'question 99', events }, STATES);
      const terms = { limit: 1e6, annualDeductible: 2, reinstatements: [] };
      expect(
        apart([compared('E(S − 2)+', losses, (loss) => yearlyPayoff(loss, terms), 2.36089)], 0.000005),
      ).toEqual([]);
    });

    it('Poisson 5, loss 100, 500 or 1000: P(600) = 0.060 (read): question 289', () => {
      const events = compound(5, [
        [100, 0.8],
        [500, 0.16],
        [1000, 0.04],
      ]);
      const losses = yearlyLosses({ name: 'question 289', events }, STATES);
      const f600 = compared('f(600)', losses, (loss) => (Math.abs(loss - 600) < 1e-6 ? 1 : 0), 0.0598929);
      expect(apart([f600], 0.00000005)).toEqual([]);
    });

    it('Poisson 5, loss 5 or k: a stop loss over 5 costs 28.03 at k = 9 alone (read): question 280', () => {
      const costAt = (k: number) => {
        const losses = yearlyLosses(
          {
            name: 'question 280',
            events: compound(5, [
              [5, 0.6],
              [k, 0.4],
            ]),
          },
          STATES,
        );
        return compared(`E(S − 5)+ at k = ${k}`, losses, (loss) => Math.max(loss - 5, 0), 28.03);
      };
      expect(apart([8, 9, 10].map(costAt), 0.005).map(({ what }) => what)).toEqual([
        'E(S − 5)+ at k = 8',
        'E(S − 5)+ at k = 10',
      ]);
    });
  });

  it('Poisson 4, loss 1, 2 or 3 (read): R. Kaas, M. Goovaerts, J. Dhaene, M. Denuit, Modern Actuarial Risk Theory, its scripts', () => {
    const events = compound(4, [
      [1, 0.25],
      [2, 0.5],
      [3, 0.25],
    ]);
    const losses = yearlyLosses({ name: 'Poisson 4', events }, STATES);
    const published = [1, 1, 2.5, 3.1666667, 4.0416667, 4.8416667, 5.0847222].map((f) => f * Math.exp(-4));
    expect(apart(comparedShares(losses, published), 0.00000005)).toEqual([]);
  });
});

describe('value at risk', () => {
  it('of a law with three values (read): Loss Data Analytics, example 10.3.4', () => {
    const figures = Float64Array.from({ length: 1_000_000 }, (_unused, s) =>
      s % 20 < 15 ? 1 : s % 20 < 19 ? 3 : 4,
    );
    const at = [0.6, 0.9, 0.95, 0.950001].map((level) => [level, valueAtRisk(figures, 1 / (1 - level))]);
    expect(at).toEqual([
      [0.6, 1],
      [0.9, 3],
      [0.95, 3],
      [0.950001, 4],
    ]);
  });
});

describe('an event list (memory): P. Grossi, H. Kunreuther, Catastrophe Modeling (2005), table 2.1', () => {
  const rates = [0.002, 0.005, 0.01, 0.02, 0.03, 0.04, 0.05, 0.05, 0.05, 0.07, 0.09, 0.1, 0.1, 0.1, 0.283];
  const losses = [25, 15, 10, 5, 3, 2, 1, 0.8, 0.7, 0.5, 0.5, 0.3, 0.2, 0.1, 0].map(
    (millions) => 1e6 * millions,
  );

  it('has a yearly mean of 760,000', () => {
    expect(Math.abs(yearlyMean(rates, losses) / 760_000 - 1)).toBeLessThan(1e-12);
  });

  it('is read as Poisson rates, as the help text says, and not as yearly probabilities', () => {
    const curve = eventCurve(rates, losses).slice(0, 6);
    expect(curve.map(({ loss }) => loss / 1e6)).toEqual([25, 15, 10, 5, 3, 2]);
    const printed = curve.map(({ probability }) => probability.toFixed(4));
    expect(printed).toEqual(['0.0020', '0.0070', '0.0169', '0.0363', '0.0648', '0.1015']);
    expect(EVENT_CURVE_HELP).toMatch(/rate.*Poisson/);
  });
});

describe('return periods', () => {
  it('1% a year is 26% in 30 years and 63% in 100 (read): flood notices of states of the USA', () => {
    expect(chanceWithin(30, 0.01)).toBeCloseTo(0.26, 2);
    expect(chanceWithin(100, 0.01)).toBeCloseTo(0.63, 2);
  });

  it('10% in 50 years is 1 in 475 (memory): common practice', () => {
    expect(Math.round(returnPeriodOf(0.1, 50))).toBe(475);
  });
});
