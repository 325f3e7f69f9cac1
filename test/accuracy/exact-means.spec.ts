import { exceedanceOf, limitedMean, severityOf } from '../../worker/engine/losses/severity';
import { layerMoments } from './layer-moments';
import {
  ALMOST_CERTAIN,
  BOTH_ENDS,
  SKEWED,
  UPPER_END,
  WHOLE,
  beta,
  lognormal,
  type LayersOf,
  type TailLaw,
} from './tail-laws';

/** The standard error that ten million draws have is what these means are compared with in every run. */
const DRAWS = 10_000_000;

/** From near-certain to so skewed that nearly all losses are next to nothing. */
const BETAS = [
  ALMOST_CERTAIN,
  ...[
    [1e7, 1e7],
    [5000, 5000],
    [40, 600],
    [2, 50],
    [50, 2],
    [1, 1],
    [0.3, 30],
    [0.1, 0.5],
    [0.2, 1e7],
    [1.5, 2e7],
  ].map(([a = 1, b = 1]) => beta(a, b)),
];
const LOGNORMALS = [0.001, 0.1, 1, 3, 10, 100, 1000].map(lognormal);
const CASES: readonly (readonly [string, TailLaw, LayersOf])[] = [
  ...[...BETAS, ...LOGNORMALS].map((law) => [law.name, law, WHOLE] as const),
  ...[beta(0.01, 2.5), beta(0.009, 9)].map((law) => [law.name, law, SKEWED] as const),
  ...[beta(0.01, 0.01), beta(0.05, 0.05)].map((law) => [law.name, law, BOTH_ENDS] as const),
  [beta(2.5, 0.01).name, beta(2.5, 0.01), UPPER_END],
];

describe('the exact mean recovery of a layer is that of a quadrature of the density, working and remote', () => {
  it.each(CASES)('%s', (_name, { moments }, layersOf) => {
    const severity = severityOf(moments.mean, moments.sd, moments.exposed);
    const off = layersOf(moments).map(({ attachment, limit }) => {
      const upTo = limitedMean(severity, attachment + limit);
      const exact = upTo - limitedMean(severity, attachment);
      const { mean, deviation, reached } = layerMoments(moments, attachment, limit);
      return {
        attachment,
        limit,
        exact,
        quadrature: mean,
        // The exact one is a difference of two means, so that its digits are those of the larger.
        ofTheLarger: Math.abs(exact - mean) / upTo,
        ofAStandardError: Math.abs(exact - mean) / (deviation / Math.sqrt(DRAWS)),
        ofTheProbability: Math.abs(exceedanceOf(severity, attachment).probability / reached - 1),
      };
    });
    expect(
      off.filter(
        ({ ofTheLarger, ofAStandardError, ofTheProbability }) =>
          !(ofTheLarger <= 1e-10 && ofAStandardError <= 1e-5 && ofTheProbability <= 1e-8),
      ),
    ).toEqual([]);
  });
});
