import { exp } from '../math/exp';
import expm1 from '@stdlib/math-base-special-expm1';
import { ln } from '../math/ln';
import log1p from '@stdlib/math-base-special-log1p';
import { demand } from '../model/refusal';

/** Law of a loss above a threshold u: P(X > x | X > u) = (1 + shape·(x − u)/scale)^(−1/shape). */
export interface GeneralisedPareto {
  /** u, same unit as the losses. */
  readonly threshold: number;
  /** ξ; at 0 the excess is exponential. */
  readonly shape: number;
  /** β, same unit as the losses, above 0. */
  readonly scale: number;
}

export interface ParetoFit extends GeneralisedPareto {
  /** Losses above the threshold. */
  readonly exceedances: number;
  readonly logLikelihood: number;
}

/** Below −½ the usual theory of likelihood fails (R. L. Smith, 1985, Biometrika 72); above 2 no insurer has seen losses. */
const LOWEST_SHAPE = -0.5;
const HIGHEST_SHAPE = 2;
const FEWEST_EXCEEDANCES = 10;
const STEP = 1 / 8;
const LOWEST_STEP = -40 / STEP;
const HIGHEST_STEP = 40 / STEP;
const GOLDEN = (Math.sqrt(5) - 1) / 2;

/**
 * Scale, shape and log-likelihood that are best at a ratio θ = ξ/β: ξ = mean of ln(1 + θy), β = ξ/θ.
 * `u` = ln(1 + θ·largest excess) keeps every term positive and is 0 for the exponential law.
 */
function profile(
  excesses: readonly number[],
  largest: number,
  u: number,
): { shape: number; scale: number; logLikelihood: number } {
  const n = excesses.length;
  const ratio = expm1(u) / largest;
  const shape = excesses.reduce((sum, y) => sum + log1p(ratio * y), 0) / n;
  const scale = ratio === 0 ? excesses.reduce((sum, y) => sum + y, 0) / n : shape / ratio;
  return { shape, scale, logLikelihood: -n * (ln(scale) + shape + 1) };
}

/**
 * Fits a generalised Pareto law to the losses above a threshold by maximum likelihood, shape between −½ and 2. The two
 * parameters are reduced to one, whose likelihood is searched on a grid and then by golden section about the best of it,
 * so that no start has to be given and no step can run away.
 * Source: S. D. Grimshaw (1993), Computing maximum likelihood estimates for the generalized Pareto distribution,
 * Technometrics 35(2).
 * @param losses any unit; those at or below the threshold are left out
 * @returns parameters to about 1e-7
 * @throws EngineInputError for fewer than 10 losses above the threshold, or a best shape at a bound
 */
export function fitGeneralisedPareto(losses: readonly number[], threshold: number): ParetoFit {
  const excesses = losses.filter((loss) => loss > threshold).map((loss) => loss - threshold);
  const exceedances = excesses.length;
  const largest = excesses.reduce((most, y) => Math.max(most, y), 0);
  demand(
    exceedances >= FEWEST_EXCEEDANCES,
    `The number of losses above the threshold of ${threshold}`,
    exceedances,
    `${FEWEST_EXCEEDANCES} or more`,
  );
  demand(largest < Infinity, 'The largest loss', largest, 'finite');
  const within = (shape: number): boolean => shape >= LOWEST_SHAPE && shape <= HIGHEST_SHAPE;
  const at = (u: number): number => {
    const { shape, logLikelihood } = profile(excesses, largest, u);
    return within(shape) ? logLikelihood : -Infinity;
  };
  let best = 0;
  let most = -Infinity;
  for (let step = LOWEST_STEP; step <= HIGHEST_STEP; step += 1) {
    const likelihood = at(step * STEP);
    if (likelihood > most) [best, most] = [step * STEP, likelihood];
  }
  let [low, high] = [best - STEP, best + STEP];
  while (high - low > 1e-10) {
    const [left, right] = [high - GOLDEN * (high - low), low + GOLDEN * (high - low)];
    if (at(left) > at(right)) high = right;
    else low = left;
  }
  const { shape, scale, logLikelihood } = profile(excesses, largest, 0.5 * (low + high));
  // The likelihood of a sample that asks for more than the bounds allow is best at one of them.
  const inside = shape > LOWEST_SHAPE + 1e-4 && shape < HIGHEST_SHAPE - 1e-4;
  demand(
    inside,
    `The best shape of the tail above ${threshold}`,
    shape,
    `above ${LOWEST_SHAPE} and below ${HIGHEST_SHAPE}`,
  );
  return { threshold, shape, scale, exceedances, logLikelihood };
}

/**
 * E[min(max(X − attachment, 0), limit) | X > threshold]: the integral of the survival function over the layer, in
 * z = ln(1 + ξ(x − u)/β)/ξ, where it is β·exp(−(1 − ξ)z) and nothing cancels.
 * @param attachment at or above the threshold
 * @param limit above 0; Infinity for an unlimited layer, which needs a shape below 1
 * @returns same unit as the law; times P(X > threshold) it is the mean for any loss
 * @throws EngineInputError outside these bounds
 */
export function meanLayerLoss(law: GeneralisedPareto, limit: number, attachment: number): number {
  const { threshold, shape, scale } = law;
  demand(scale > 0 && scale < Infinity, 'The scale', scale, 'above 0');
  demand(
    attachment >= threshold && attachment < Infinity,
    'The attachment',
    attachment,
    `the threshold of the fit, ${threshold}, or above`,
  );
  demand(limit > 0, 'The limit', limit, 'above 0');
  demand(limit < Infinity || shape < 1, 'The shape of the tail of an unlimited layer', shape, 'below 1');
  const end = shape < 0 ? -scale / shape : Infinity;
  const scoreOf = (excess: number): number => {
    if (excess >= end) return Infinity;
    return shape === 0 ? excess / scale : log1p((shape * excess) / scale) / shape;
  };
  const from = scoreOf(attachment - threshold);
  if (from === Infinity) return 0;
  const length = scoreOf(attachment - threshold + limit) - from;
  const decay = 1 - shape;
  const area = decay === 0 ? length : -expm1(-decay * length) / decay;
  return scale * exp(-decay * from) * area;
}
