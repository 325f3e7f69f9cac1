import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { betaCdf, betaLaw, betaQuantile, logitStart } from '../../../worker/engine/math/beta';
import { normalCdf, normalQuantile } from '../../../worker/engine/math/normal';
import { apart, compared, yearlyLosses } from './simulate';

/** Values of other libraries and the scripts that made them; see fixtures/reference/README.md. */
const read = <Content>(file: string): Content =>
  JSON.parse(readFileSync(join(__dirname, '../../../fixtures/reference', file), 'utf8')) as Content;

const special = read<{
  source: string;
  betaCdf: [a: number, b: number, x: number, lower: number, upper: number][];
  betaQuantile: [a: number, b: number, score: number, quantile: number, rest: number][];
  erfc: [x: number, value: number][];
  normalQuantile: [level: number, quantile: number][];
}>('special.json');

const aggregate = read<{
  source: string;
  laws: {
    name: string;
    meanCount: number;
    varianceToMean: number;
    step: number;
    severity: number[];
    mean: number;
    steps: number[];
    cdf: number[];
  }[];
}>('aggregate.json');

/** |found ÷ expected − 1|, or 0 where both are 0. */
const off = (found: number, expected: number): number =>
  found === expected ? 0 : Math.abs(found / expected - 1);

describe(`special functions beside ${special.source}`, () => {
  it('the incomplete beta function, each tail where it is the smaller', () => {
    expect(special.betaCdf.length).toBeGreaterThan(700);
    const wrong = special.betaCdf.flatMap(([a, b, x, lower, upper]) => {
      const found = betaCdf(betaLaw(a, b), x);
      const error = lower < upper ? off(found.lower, lower) : off(found.upper, upper);
      return error < 1e-10 ? [] : [{ a, b, x, lower, upper, found, error }];
    });
    expect(wrong).toEqual([]);
  });

  it('its inverse', () => {
    expect(special.betaQuantile.length).toBeGreaterThan(900);
    const wrong = special.betaQuantile.flatMap(([a, b, score, quantile, rest]) => {
      const law = betaLaw(a, b);
      const found = betaQuantile(law, score, normalCdf(-Math.abs(score)), logitStart(law));
      // Near 1 the double itself holds no more than the absolute error.
      const error = Math.min(off(found, quantile), Math.abs(1 - found - rest) / Math.max(rest, 1e-5));
      return error < 1e-10 ? [] : [{ a, b, score, quantile, rest, found, error }];
    });
    expect(wrong).toEqual([]);
  });

  it('erfc, through the normal law', () => {
    expect(special.erfc.length).toBeGreaterThan(100);
    const wrong = special.erfc.flatMap(([x, value]) => {
      const found = 2 * normalCdf(-Math.SQRT2 * x);
      // The last digit of √2·x moves a tail by x² times as much.
      const error = off(found, value) / (1 + x * x);
      return error < 1e-15 ? [] : [{ x, value, found, error }];
    });
    expect(wrong).toEqual([]);
  });

  it('the normal quantile', () => {
    const wrong = special.normalQuantile.flatMap(([level, quantile]) => {
      const found = normalQuantile(level);
      const error = off(found, quantile);
      return error < 1e-14 ? [] : [{ level, quantile, found, error }];
    });
    expect(wrong).toEqual([]);
  });
});

describe(`a year’s summed loss, simulated, within 4 standard errors of ${aggregate.source}`, () => {
  it.each(aggregate.laws.map((law) => [law.name, law] as const))('%s', (name, law) => {
    const { meanCount, varianceToMean, step, severity, steps, cdf, mean } = law;
    const events = severity.map((p, i) => ({ rate: meanCount * p, loss: (i + 1) * step }));
    const model = { name, events, ...(varianceToMean > 1 ? { varianceToMean } : {}) };
    const losses = yearlyLosses(model, varianceToMean > 1 ? 49_152 : 98_304);
    const shares = steps.map((k, i) => {
      const bound = (k + 1e-6) * step;
      return compared(`P(S ≤ ${k * step})`, losses, (loss) => (loss <= bound ? 1 : 0), cdf[i] ?? Number.NaN);
    });
    expect(apart([...shares, compared('mean', losses, (loss) => loss, mean)])).toEqual([]);
  });
});
