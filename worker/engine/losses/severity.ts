import { exp } from '../math/exp';
import log1p from '@stdlib/math-base-special-log1p';
import { betaAtLogit, betaCdf, betaLaw, betaQuantile, logitStart, type BetaLaw } from '../math/beta';
import { ln } from '../math/ln';
import { normalCdf, normalQuantile } from '../math/normal';
import { EngineInputError, demand } from '../model/refusal';

/** The law of a loss given its event, in the table's currency. */
export type Severity =
  | { readonly kind: 'certain'; readonly mean: number }
  | { readonly kind: 'lognormal'; readonly mean: number; readonly location: number; readonly scale: number }
  /** The damage ratio loss ÷ exposed value is beta with shapes a and b. */
  | { readonly kind: 'beta'; readonly mean: number; readonly exposed: number; readonly a: number; readonly b: number };

/**
 * Fits the law to its moments: beta on the damage ratio with an exposed value, lognormal without (NaN), certain where the
 * deviation is 0.
 * @throws EngineInputError for moments that no such law has
 */
export function severityOf(mean: number, sd: number, exposed: number): Severity {
  demand(mean >= 0 && mean < Infinity, 'A mean loss', mean, '0 or more');
  demand(sd >= 0 && sd < Infinity, 'The deviation of a loss', sd, '0 or more');
  demand(exposed !== exposed || exposed < Infinity, 'An exposed value', exposed, 'finite');
  if (sd === 0 || mean === 0) {
    demand(sd === 0, 'The deviation of a loss with mean 0', sd, '0');
    demand(!(exposed < mean), 'A mean loss', mean, `at most the exposed value, ${exposed}`);
    return { kind: 'certain', mean };
  }
  if (exposed !== exposed) {
    const ratio = sd / mean;
    const variance = log1p(ratio * ratio);
    return { kind: 'lognormal', mean, location: ln(mean) - 0.5 * variance, scale: Math.sqrt(variance) };
  }
  const m = mean / exposed;
  const s = sd / exposed;
  const total = (m * (1 - m)) / (s * s) - 1;
  if (!(m > 0 && m < 1 && total > 0)) {
    throw new EngineInputError(
      `No damage ratio has mean ${m} and deviation ${s}: the squared deviation must be below mean × (exposed value − mean).`,
      { parameter: 'The squared deviation of a loss', value: sd * sd, bound: 'below mean × (exposed value − mean)' },
    );
  }
  return { kind: 'beta', mean, exposed, a: m * total, b: (1 - m) * total };
}

/** Quantile of a beta law at Φ(score), exact to about 1e-12. */
export function betaAtScore(law: BetaLaw, score: number): number {
  return betaQuantile(law, score, normalCdf(score <= 0 ? score : -score), logitStart(law));
}

/** The loss at a normal score: the law's quantile at Φ(score). */
export function lossAt(severity: Severity, score: number): number {
  if (severity.kind === 'certain') return severity.mean;
  if (severity.kind === 'lognormal') return exp(severity.location + severity.scale * score);
  return severity.exposed * betaAtScore(betaLaw(severity.a, severity.b), score);
}

/** P(X > threshold) and the score above which the loss is: +Infinity where it never is, −Infinity where it always is. */
export function exceedanceOf(severity: Severity, threshold: number): { probability: number; score: number } {
  if (severity.kind === 'certain') return severity.mean > threshold ? { probability: 1, score: -Infinity } : { probability: 0, score: Infinity };
  if (threshold < 0 || (threshold === 0 && severity.mean > 0)) return { probability: 1, score: -Infinity };
  if (severity.kind === 'lognormal') {
    const score = (ln(threshold) - severity.location) / severity.scale;
    return { probability: normalCdf(-score), score };
  }
  const { lower, upper } = betaCdf(betaLaw(severity.a, severity.b), threshold / severity.exposed);
  return { probability: upper, score: lower <= 0.5 ? normalQuantile(lower) : -normalQuantile(upper) };
}

/**
 * E[min(X, d)], exact: by the incomplete beta function, the normal law, or the mean itself.
 * @param law that of a beta severity, where it is at hand
 */
export function limitedMean(severity: Severity, d: number, law?: BetaLaw): number {
  if (d <= 0) return 0;
  if (severity.kind === 'certain') return Math.min(severity.mean, d);
  if (severity.kind === 'lognormal') {
    const z = (ln(d) - severity.location) / severity.scale;
    return severity.mean * normalCdf(z - severity.scale) + d * normalCdf(-z);
  }
  if (d >= severity.exposed) return severity.mean;
  const x = d / severity.exposed;
  const { a } = severity;
  const { lower, upper, slope } = betaAtLogit(law ?? betaLaw(a, severity.b), ln(x) - log1p(-x));
  // I(a + 1, b) = I(a, b) − x^a·(1 − x)^b/(a·B(a, b)), by whichever of I and 1 − I is the smaller.
  const below = lower < upper ? lower - slope / a : 1 - upper - slope / a;
  return severity.mean * Math.max(below, 0) + d * upper;
}
