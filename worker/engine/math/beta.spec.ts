import oracle from '@stdlib/stats-base-dists-beta-quantile';
import { betaLaw, betaQuantile, logitStart } from './beta';
import { normalCdf, normalQuantile } from './normal';

const SHAPES = [0.02, 0.1, 0.5, 1, 1.7, 5, 30, 400, 20_000, 1e6] as const;
const LEVELS = [1e-9, 1e-6, 1e-3, 0.05, 0.3, 0.5, 0.7, 0.95, 0.999, 1 - 1e-6, 1 - 1e-9] as const;

describe('beta quantile', () => {
  it.each(SHAPES.flatMap((a) => SHAPES.map((b) => [a, b] as const)))('agrees with an independent library: a = %p, b = %p', (a, b) => {
    const law = betaLaw(a, b);
    const start = logitStart(law);
    for (const p of LEVELS) {
      const score = normalQuantile(p);
      const found = betaQuantile(law, score, normalCdf(score <= 0 ? score : -score), start);
      const expected = oracle(p, a, b);
      // Below the smallest of doubles the oracle has nothing to say.
      if (expected < 1e-290) continue;
      const off = Math.min(Math.abs(found - expected) / expected, Math.abs(found - expected) / Math.max(1 - expected, 1e-16));
      expect({ a, b, p, found, expected, fine: off < 1e-6 }).toEqual({ a, b, p, found, expected, fine: true });
    }
  });
});
