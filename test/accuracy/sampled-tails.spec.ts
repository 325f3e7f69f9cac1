import { Worker } from 'node:worker_threads';
import { limitedMean, severityOf } from '../../worker/engine/losses/severity';
import { bundled } from './bundle';
import type { DrawCase, Drawn, Path } from './draw-means';
import { layerMoments } from './layer-moments';
import {
  ALMOST_CERTAIN,
  BOTH_ENDS,
  REMOTE,
  SKEWED,
  UPPER,
  UPPER_END,
  WHOLE,
  beta,
  lognormal,
  type LayersOf,
  type TailLaw,
} from './tail-laws';

const DRAWS = 10_000_000;
const THREADS = 2;

interface Way extends TailLaw {
  readonly path: Path;
  readonly tabled: boolean;
  readonly layersOf: LayersOf;
}

const drawnBy = (path: Path, tabled: boolean, layersOf: LayersOf, laws: readonly TailLaw[]): Way[] =>
  laws.map((law) => ({ ...law, path, tabled, layersOf }));

/** Every way in which a run draws; the slowest first, so that no thread is left alone with them at the end. */
const WAYS: readonly Way[] = [
  // By the exact quantile: shapes too small for a table, then those that a run draws from too seldom.
  ...drawnBy('programme', false, BOTH_ENDS, [beta(0.01, 0.01)]),
  ...drawnBy('programme', false, SKEWED, [beta(0.009, 9)]),
  ...drawnBy('exact', false, UPPER, [beta(0.1, 0.5), beta(2, 50)]),
  ...drawnBy('exact', false, REMOTE, [beta(1.5, 2e7), ALMOST_CERTAIN, beta(0.3, 30)]),
  // By table, of every loss: from near-certain to the edges of what a table holds.
  ...drawnBy('programme', true, WHOLE, [
    ALMOST_CERTAIN,
    beta(5000, 5000),
    beta(2, 50),
    beta(0.3, 30),
    beta(0.12, 0.6),
    beta(0.2, 1e7),
  ]),
  ...drawnBy('programme', true, SKEWED, [beta(0.011, 2.6)]),
  ...drawnBy('programme', true, UPPER_END, [beta(2.6, 0.011)]),
  // By table, of the losses over the lowest attachment alone.
  ...drawnBy('book', true, UPPER, [beta(2, 50), beta(0.3, 30), beta(0.011, 2.6)]),
  ...drawnBy('programme', false, WHOLE, [0.001, 0.1, 1, 3, 10].map(lognormal)),
  ...drawnBy('book', false, UPPER, [100, 1000].map(lognormal)),
];

const CASES = WAYS.map(({ moments, path, layersOf }, w): DrawCase => {
  const seed = (0x5eed0000 + w).toString(16).padStart(16, '0');
  return { ...moments, path, seed, layers: layersOf(moments), draws: DRAWS };
});

/** What is drawn of each case; each thread of compiled code takes the next as it is free. */
async function drawAll(cases: readonly DrawCase[]): Promise<Drawn[]> {
  const code = bundled('draw-means.ts', 'node');
  const answers: Drawn[] = [];
  let next = 0;
  const serve = async (): Promise<void> => {
    const thread = new Worker(code, { eval: true });
    try {
      for (let at = next; at < cases.length; at = next) {
        next = at + 1;
        answers[at] = await new Promise<Drawn>((resolve, reject) => {
          thread.removeAllListeners().once('message', resolve).once('error', reject);
          thread.postMessage(cases[at]);
        });
      }
    } finally {
      await thread.terminate();
    }
  };
  await Promise.all(Array.from({ length: THREADS }, serve));
  return answers;
}

/** How far each layer's drawn mean is from its exact one, in standard errors that are exact themselves. */
function distancesOf(answers: readonly Drawn[]): { readonly errors: number }[] {
  return CASES.flatMap((own, w) =>
    own.layers.map(({ attachment, limit }, l) => {
      const severity = severityOf(own.mean, own.sd, own.exposed);
      const exact = limitedMean(severity, attachment + limit) - limitedMean(severity, attachment);
      const { deviation } = layerMoments(own, attachment, limit);
      const { draws, meanRecovery } = answers[w] ?? { draws: 0, meanRecovery: [] };
      const found = meanRecovery[l] ?? Number.NaN;
      const errors = (found - exact) / (deviation / Math.sqrt(draws));
      return { law: WAYS[w]?.name, path: own.path, attachment, limit, exact, found, errors };
    }),
  );
}

describe('the sampler at ten million draws a law', () => {
  let answers: readonly Drawn[];
  let distances: readonly { readonly errors: number }[];
  beforeAll(async () => {
    answers = await drawAll(CASES);
    distances = distancesOf(answers);
  }, 240_000);

  it('goes every way that a run goes', () => {
    const paths = answers.map(({ tabled }, w) => [WAYS[w]?.name, WAYS[w]?.path, tabled]);
    expect(paths).toEqual(WAYS.map(({ name, path, tabled }) => [name, path, tabled]));
    expect(answers.filter(({ draws }) => draws < 0.999 * DRAWS)).toEqual([]);
  });

  it('has every layer’s exact mean recovery within 4 standard errors', () => {
    expect(distances.filter(({ errors }) => !(Math.abs(errors) <= 4))).toEqual([]);
  });

  it('is off by as much as chance has it, to either side', () => {
    const meanOf = (of: (errors: number) => number): number =>
      distances.reduce((sum, { errors }) => sum + of(errors), 0) / distances.length;
    const scatter = Math.sqrt(meanOf((errors) => errors * errors));
    const mean = meanOf((errors) => errors);
    // Layers of one law are drawn together: it is the laws that are independent.
    const fair = scatter > 0.75 && scatter < 1.25 && Math.abs(mean) < 4 / Math.sqrt(WAYS.length);
    expect({ scatter, mean, fair, distances: fair ? [] : distances }).toEqual({
      scatter,
      mean,
      fair: true,
      distances: [],
    });
  });
});
