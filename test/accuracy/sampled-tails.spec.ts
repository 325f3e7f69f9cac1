import { Worker } from 'node:worker_threads';
import { limitedMean, severityOf } from '../../worker/engine/losses/severity';
import { bundled } from './bundle';
import type { DrawCase, DrawnMean } from './draw-means';

const DRAWS = 10_000_000;
const MEAN = 100;

/** From near-certain to extremely skewed; an exposed value of NaN makes the loss lognormal. */
const LAWS = [
  { variation: 0.001, exposed: MEAN * 5 },
  ...[0.05, 0.3, 1, 3, 9.9].map((variation) => ({ variation, exposed: MEAN * 100 })),
  ...[0.01, 0.5, 0.99].map((variation) => ({ variation, exposed: MEAN * 2 })),
  { variation: 30, exposed: MEAN * 1000 },
  { variation: 1.5, exposed: MEAN * 100_000 },
  ...[0.001, 0.3, 1, 3, 10].map((variation) => ({ variation, exposed: Number.NaN })),
];

/** Layers about the law's own spread: below the mean, over it, and out in the tail. */
function layersOf(variation: number): { limit: number; attachment: number }[] {
  const sd = variation * MEAN;
  return [
    { attachment: Math.max(MEAN - sd, 0), limit: sd },
    { attachment: MEAN, limit: sd },
    { attachment: MEAN + 2 * sd, limit: sd },
  ];
}

function drawnBy(code: string, cases: readonly DrawCase[]): Promise<DrawnMean[][]> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(code, { eval: true, workerData: cases });
    worker.once('message', resolve);
    worker.once('error', reject);
  });
}

describe('the sampler at ten million draws a law', () => {
  it('has every layer’s exact mean recovery within 4 standard errors', async () => {
    const cases = LAWS.map(({ variation, exposed }): DrawCase => ({ mean: MEAN, sd: variation * MEAN, exposed, layers: layersOf(variation), draws: DRAWS }));
    const code = bundled('draw-means.ts', 'node');
    // Laws without a table take twenty times as long: each thread takes every other law.
    const [even = [], odd = []] = await Promise.all([0, 1].map((turn) => drawnBy(code, cases.filter((_one, c) => c % 2 === turn))));
    const drawn = cases.map((_one, c) => (c % 2 === 0 ? even : odd)[Math.floor(c / 2)]);
    const compared = cases.flatMap(({ mean, sd, exposed, layers }, c) =>
      layers.map(({ limit, attachment }, l) => {
        const severity = severityOf(mean, sd, exposed);
        const exact = limitedMean(severity, attachment + limit) - limitedMean(severity, attachment);
        const { mean: found, standardError } = drawn[c]?.[l] ?? { mean: Number.NaN, standardError: 0 };
        const errors = standardError === 0 ? (Math.abs(found - exact) <= 1e-9 * MEAN ? 0 : Infinity) : (found - exact) / standardError;
        return { sd, exposed, limit, attachment, exact, found, errors };
      }),
    );
    expect(compared.filter(({ errors }) => !(Math.abs(errors) <= 4))).toEqual([]);
    // A table that was off everywhere in one direction would show in the mean of all.
    const meanError = compared.reduce((sum, { errors }) => sum + errors, 0) / compared.length;
    expect(Math.abs(meanError)).toBeLessThan(1.5);
  }, 180_000);
});
