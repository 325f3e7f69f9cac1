import exp from '@stdlib/math-base-special-exp';
import ln from '@stdlib/math-base-special-ln';
import log1p from '@stdlib/math-base-special-log1p';
import { betaCdf, betaLaw, betaQuantile, logitStart, type BetaLaw, type LogitStart } from '../math/beta';
import { normalCdf, normalQuantile } from '../math/normal';
import { EngineInputError } from '../model/inputs';

/** The law of a loss given its event, in the table's currency, as a function of a standard normal score. */
export type Severity =
  | { readonly kind: 'certain'; readonly mean: number }
  | { readonly kind: 'lognormal'; readonly mean: number; readonly location: number; readonly scale: number }
  | { readonly kind: 'beta'; readonly mean: number; readonly exposed: number; readonly law: BetaLaw; readonly start: LogitStart };

/**
 * Fits the law to its moments: beta on the damage ratio with an exposed value, lognormal without, certain where the
 * deviation is 0.
 * @throws EngineInputError for moments that no such law has
 */
export function severityOf(mean: number, sd: number, exposed: number): Severity {
  if (!(mean >= 0 && mean < Infinity) || !(sd >= 0 && sd < Infinity)) throw new EngineInputError('A loss needs a mean and a deviation of 0 or more.');
  if (sd === 0 || mean === 0) {
    if (sd > 0) throw new EngineInputError('A loss with mean 0 cannot have a deviation.');
    if (exposed < mean) throw new EngineInputError('A mean loss cannot be above the exposed value.');
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
    throw new EngineInputError(`No damage ratio has mean ${m} and deviation ${s}: the squared deviation must be below mean × (exposed value − mean).`);
  }
  const law = betaLaw(m * total, (1 - m) * total);
  return { kind: 'beta', mean, exposed, law, start: logitStart(law) };
}

/** The loss at a normal score: the law's quantile at Φ(score). */
export function lossAt(severity: Severity, score: number): number {
  if (severity.kind === 'certain') return severity.mean;
  if (severity.kind === 'lognormal') return exp(severity.location + severity.scale * score);
  const tail = normalCdf(score <= 0 ? score : -score);
  return severity.exposed * betaQuantile(severity.law, score, tail, severity.start);
}

/** The score above which the loss exceeds a threshold; +Infinity where it never does, −Infinity where it always does. */
export function scoreAbove(severity: Severity, threshold: number): number {
  if (severity.kind === 'certain') return severity.mean > threshold ? -Infinity : Infinity;
  if (threshold <= 0) return -Infinity;
  if (severity.kind === 'lognormal') return (ln(threshold) - severity.location) / severity.scale;
  const at = betaCdf(severity.law, threshold / severity.exposed);
  return at.lower <= 0.5 ? normalQuantile(at.lower) : -normalQuantile(at.upper);
}

/** E[min(X, d)], exact: by incomplete beta functions, the normal law, or the mean itself. */
export function limitedMean(severity: Severity, d: number): number {
  if (d <= 0) return 0;
  if (severity.kind === 'certain') return Math.min(severity.mean, d);
  if (severity.kind === 'lognormal') {
    const z = (ln(d) - severity.location) / severity.scale;
    return severity.mean * normalCdf(z - severity.scale) + d * normalCdf(-z);
  }
  if (d >= severity.exposed) return severity.mean;
  const x = d / severity.exposed;
  const { a, b } = severity.law;
  return severity.mean * betaCdf(betaLaw(a + 1, b), x).lower + d * betaCdf(severity.law, x).upper;
}
