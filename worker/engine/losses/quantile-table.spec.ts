import oracle from '@stdlib/stats-base-dists-beta-quantile';
import { betaLaw } from '../math/beta';
import { normalCdf, normalQuantile } from '../math/normal';
import { KNOTS, LAW_KNOTS, RANGE, fillKnots, fitsTable, logitFromKnots } from './quantile-table';

const SHAPES = [0.01, 0.03, 0.1, 0.2, 0.5, 1, 2.5, 8, 40, 300, 10_000, 1e6, 1e7] as const;
/** Levels half-way between knots, where the quintic is furthest off, and others. */
const SCORES = Array.from({ length: 4 * KNOTS - 3 }, (_unused, i) => -RANGE + (i * 2 * RANGE) / (4 * KNOTS - 4));

describe('beta quantile from a table', () => {
  it.each(SHAPES.flatMap((a) => SHAPES.filter((b) => fitsTable(a, b)).map((b) => [a, b] as const)))('is as close as stated to an independent library: a = %p, b = %p', (a, b) => {
    const knots = new Float64Array(LAW_KNOTS);
    fillKnots(knots, 0, betaLaw(a, b));
    const off = SCORES.map((score) => {
      const y = logitFromKnots(knots, 0, score);
      // The smaller of quantile and complement, so that both are held to a relative error.
      const found = score <= 0 ? 1 / (1 + Math.exp(-y)) : 1 / (1 + Math.exp(y));
      const expected = score <= 0 ? oracle(normalCdf(score), a, b) : oracle(normalCdf(-score), b, a);
      if (expected < 1e-290) return { score, error: 0, level: 0, found, expected };
      return { score, error: Math.abs(found / expected - 1), level: normalCdf(score), found, expected };
    });
    const worst = off.reduce((most, one) => (one.error > most.error ? one : most));
    const bound = Math.min(a, b) < 0.5 ? 1e-5 : 1e-6;
    expect({ ...worst, fine: worst.error < bound }).toEqual({ ...worst, fine: true });
  });

  it('meets its own range at both ends', () => {
    expect(normalQuantile(normalCdf(-RANGE))).toBeCloseTo(-RANGE, 10);
  });
});
