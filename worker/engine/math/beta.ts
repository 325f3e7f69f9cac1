import betaln from '@stdlib/math-base-special-betaln';
import { exp } from './exp';
import log1p from '@stdlib/math-base-special-log1p';
import { ln } from './ln';

const LARGE = 1e100;
const MOST_TERMS = 10_000;

/** A beta law with what every evaluation of it needs again. Shapes a, b above 0. */
export interface BetaLaw {
  readonly a: number;
  readonly b: number;
  readonly logBeta: number;
}

export function betaLaw(a: number, b: number): BetaLaw {
  return { a, b, logBeta: betaln(a, b) };
}

/**
 * Continued fraction of the incomplete beta function, 1/(1 + d₁/(1 + d₂/(1 + …))) with the coefficients of M. Abramowitz,
 * I. A. Stegun, 26.5.8, by the forward recurrence of its convergents: two divisions a round, where Lentz's method has six.
 * Converges quickly for x < (a + 1)/(a + b + 2).
 */
function continuedFraction(x: number, a: number, b: number): number {
  // Numerator and denominator of the last two convergents of 1 + d₁/(1 + …).
  let [numerator, denominator] = [1, 1];
  let [before, beforeDenominator] = [1, 0];
  const first = (-(a + b) * x) / (a + 1);
  [before, numerator] = [numerator, numerator + first * before];
  [beforeDenominator, denominator] = [denominator, denominator + first * beforeDenominator];
  for (let m = 1; m <= MOST_TERMS; m += 1) {
    const twice = a + 2 * m;
    const even = (m * (b - m) * x) / ((twice - 1) * twice);
    const odd = (-(a + m) * (a + b + m) * x) / (twice * (twice + 1));
    before = numerator + even * before;
    beforeDenominator = denominator + even * beforeDenominator;
    numerator = before + odd * numerator;
    denominator = beforeDenominator + odd * denominator;
    // The last two convergents agree: denominators' quotients are compared without dividing.
    const gap = denominator * before - beforeDenominator * numerator;
    if (Math.abs(gap) <= 3e-16 * Math.abs(denominator * before)) break;
    // Only quotients matter: kept in range, for with large shapes the terms shrink or grow without end.
    const magnitude = Math.abs(numerator);
    if (magnitude > LARGE || magnitude < 1 / LARGE) {
      numerator /= magnitude;
      denominator /= magnitude;
      before /= magnitude;
      beforeDenominator /= magnitude;
    }
  }
  return denominator / numerator;
}

/** ln x and ln(1 − x) of x = 1/(1 + exp(−y)), both without cancellation. */
function logsOfLogit(y: number): { logX: number; logComplement: number } {
  if (y <= 0) {
    const e = log1p(exp(y));
    return { logX: y - e, logComplement: -e };
  }
  const e = log1p(exp(-y));
  return { logX: -e, logComplement: -y - e };
}

/**
 * P(B ≤ x) and the density in logit space, at x = 1/(1 + exp(−y)).
 * @returns `lower` P(B ≤ x), `upper` P(B > x), each accurate where it is the smaller; `slope` = x(1 − x)·density(x)
 */
export function betaAtLogit(law: BetaLaw, y: number): { lower: number; upper: number; slope: number } {
  const { logX, logComplement } = logsOfLogit(y);
  const slope = exp(law.a * logX + law.b * logComplement - law.logBeta);
  const x = exp(logX);
  if (x < (law.a + 1) / (law.a + law.b + 2)) {
    const lower = (slope / law.a) * continuedFraction(x, law.a, law.b);
    return { lower, upper: 1 - lower, slope };
  }
  const upper = (slope / law.b) * continuedFraction(exp(logComplement), law.b, law.a);
  return { lower: 1 - upper, upper, slope };
}

/** Regularised incomplete beta function I_x(a, b) with its complement. */
export function betaCdf(law: BetaLaw, x: number): { lower: number; upper: number } {
  if (x <= 0) return { lower: 0, upper: 1 };
  if (x >= 1) return { lower: 1, upper: 0 };
  return betaAtLogit(law, ln(x) - log1p(-x));
}

/** Where a quantile search for a law may start: its logit is near normal with this mean and deviation. */
export interface LogitStart {
  readonly mean: number;
  readonly sd: number;
}

/** ψ(x) and ψ′(x) to about 1e-6 by recurrence to x ≥ 6 and their asymptotic series; only starting values rest on them. */
function digammaPair(shape: number): { digamma: number; trigamma: number } {
  let x = shape;
  let digamma = 0;
  let trigamma = 0;
  while (x < 6) {
    digamma -= 1 / x;
    trigamma += 1 / (x * x);
    x += 1;
  }
  const r = 1 / (x * x);
  digamma += ln(x) - 0.5 / x - r * (1 / 12 - r * (1 / 120 - r / 252));
  trigamma += 1 / x + r / 2 + (r / x) * (1 / 6 - r * (1 / 30 - r / 42));
  return { digamma, trigamma };
}

export function logitStart(law: BetaLaw): LogitStart {
  const a = digammaPair(law.a);
  const b = digammaPair(law.b);
  return { mean: a.digamma - b.digamma, sd: Math.sqrt(a.trigamma + b.trigamma) };
}

const MOST_STEPS = 60;

/** Steps end once the last one was so small that the next would change nothing that is wanted: Halley's error is of its cube. */
export const EXACT = 1e-4;

/**
 * Logit of a beta quantile at a normal score, by Halley's method on the logarithm of the smaller tail in logit space. The
 * logit of a beta variable has a log-concave density, so both tails are log-concave in it (Bagnoli and Bergstrom 2005,
 * Economic Theory 26): the steps come in from a start on the outer side; one that leaves the interval in which the quantile
 * is known to lie is halved instead.
 * @param score normal score s; the quantile is at Φ(s)
 * @param logTail ln Φ(−|s|), the smaller tail
 * @param guess where to start
 * @param start from `logitStart` of the same law: where to go back to from a point at which the tail vanishes
 * @param last size of the step, in units over which the tail changes, after which no other is taken
 * @returns the logit, relative error of the tail about last³, and there the density of the logit
 */
export function betaLogitAtScore(law: BetaLaw, score: number, logTail: number, guess: number, start: LogitStart, last: number): { logit: number; density: number } {
  const low = score <= 0;
  const sign = low ? 1 : -1;
  // Mirrored, the upper tail is the lower one of the law with its shapes exchanged.
  const mirrored: BetaLaw = low ? law : { a: law.b, b: law.a, logBeta: law.logBeta };
  const shapes = mirrored.a + mirrored.b;
  // A concave function lies below its asymptote, ln P(B ≤ x) ≤ a·y − ln(a·B(a, b)), whose root is thus left of the quantile.
  const asymptote = (logTail + ln(mirrored.a) + mirrored.logBeta) / mirrored.a;
  let y = sign * guess;
  if (!(y > asymptote)) y = asymptote;
  let density = 0;
  let below = -Infinity;
  let above = Infinity;
  for (let step = 0; step < MOST_STEPS; step += 1) {
    const at = betaAtLogit(mirrored, y);
    const logLower = at.lower > 0 ? ln(at.lower) : -Infinity;
    if (logLower < logTail) below = y;
    else above = y;
    const x = 1 / (1 + exp(-y));
    // First and second derivative of the logarithm of the tail: r = g/p and r·(a − (a + b)·x − r).
    const rate = at.slope / at.lower;
    const pull = mirrored.a - shapes * x;
    const newton = (logLower - logTail) / rate;
    const bend = newton * (pull - rate);
    const move = newton / (1 - 0.5 * bend);
    if (!(at.lower > 0 && at.slope > 0 && bend < 1 && y - move >= below - 1e-7 && y - move <= above + 1e-7)) {
      y = 0.5 * ((below > -Infinity ? below : y) + (above < Infinity ? above : sign * start.mean));
      continue;
    }
    y -= move;
    // The density's logarithm changes by pull and bends by −(a + b)·x·(1 − x).
    density = at.slope * exp(-move * pull - 0.5 * move * move * shapes * x * (1 - x));
    if (bend < last && bend > -last && newton * rate < last && newton * rate > -last) break;
  }
  return { logit: sign * y, density };
}

/**
 * Quantile of a beta law at a normal score.
 * @param tail Φ(−|s|), the smaller tail
 * @param start from `logitStart` of the same law
 * @returns the quantile, 0 to 1; relative error about 1e-12
 */
export function betaQuantile(law: BetaLaw, score: number, tail: number, start: LogitStart): number {
  if (tail <= 0) return score <= 0 ? 0 : 1;
  const { logit } = betaLogitAtScore(law, score, ln(tail), start.mean + start.sd * score, start, EXACT);
  return 1 / (1 + exp(-logit));
}
