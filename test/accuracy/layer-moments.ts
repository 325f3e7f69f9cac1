import { integrals } from './quadrature';

const { abs, exp, expm1, log, log1p, max, min, sqrt } = Math;

/** A loss given its event, as a row of a loss table states it; without an exposed value (NaN) it is lognormal. */
export interface LossMoments {
  readonly mean: number;
  readonly sd: number;
  readonly exposed: number;
}

export interface LayerMoments {
  /** E[Y] and sd(Y) of Y = min(max(X − attachment, 0), limit). */
  readonly mean: number;
  readonly deviation: number;
  /** P(X > attachment). */
  readonly reached: number;
}

/** Logarithm of a density on the whole line but for a constant, about its mode, and the loss at each place. */
interface Line {
  readonly logDensity: (x: number) => number;
  readonly width: (x: number) => number;
  readonly mode: number;
  readonly loss: (x: number) => number;
  readonly placeOf: (loss: number) => number;
}

/** Weights below exp(−FAR) of the largest are left out: far less than what the most remote layer rests on. */
const FAR = 100;

/** Beyond this logit the logistic is 1, or an exponential, to all digits. */
const FLAT = 45;

/** The normal score of a lognormal loss. */
function lognormal(mean: number, sd: number): Line {
  const variance = log1p((sd / mean) * (sd / mean));
  const [location, scale] = [log(mean) - variance / 2, sqrt(variance)];
  return {
    logDensity: (s) => (-s * s) / 2,
    width: () => 0.5,
    mode: 0,
    loss: (s) => exp(location + scale * s),
    placeOf: (loss) => (log(loss) - location) / scale,
  };
}

/**
 * The logit of a beta damage ratio, on which xᵃ·(1 − x)ᵇ has one peak and falls off as an exponential on both sides. By its
 * distance from the peak, so that large shapes do not cancel.
 */
function beta(mean: number, sd: number, exposed: number): Line {
  const ratio = mean / exposed;
  const total = (mean * (exposed - mean)) / (sd * sd) - 1;
  const rest = (exposed - mean) / exposed;
  const [a, b] = [ratio * total, rest * total];
  const mode = log(mean / (exposed - mean));
  const logistic = (y: number): number => 1 / (1 + exp(-y));
  /** ln(x/share) at a distance from the peak; of the complement with all mirrored. Far below, the exponential would overflow. */
  const logRatio = (distance: number, share: number, other: number): number =>
    distance < -300 ? distance - log1p(share * expm1(distance)) : -log1p(other * expm1(-distance));
  return {
    logDensity: (y) => a * logRatio(y - mode, ratio, rest) + b * logRatio(mode - y, rest, ratio),
    // As far as the density, or the pole of the logistic, lets a polynomial of high degree follow; far out it is an exponential.
    width: (y) => {
      const x = logistic(y);
      const slope = abs(a - (a + b) * x);
      const bend = (a + b) * x * (1 - x);
      const smooth = y < -FLAT ? 1 - FLAT - y : y < FLAT ? 1 : Infinity;
      return min(smooth, 2 / (sqrt(bend) + slope / 4));
    },
    mode,
    loss: (y) => exposed * logistic(y),
    placeOf: (loss) => (loss >= exposed ? Infinity : log(loss / (exposed - loss))),
  };
}

/** Where the density has fallen to nothing, on one side of its peak. */
function end({ logDensity, mode, width }: Line, side: 1 | -1): number {
  let step = width(mode);
  while (logDensity(mode + side * step) > -FAR) step *= 1.25;
  return mode + side * step;
}

/**
 * What a layer recovers of one loss, by quadrature of the density that the stated moments match, over itself: it shares no
 * function with the engine, and needs no special one.
 */
export function layerMoments(
  { mean, sd, exposed }: LossMoments,
  attachment: number,
  limit: number,
): LayerMoments {
  const line = Number.isNaN(exposed) ? lognormal(mean, sd) : beta(mean, sd, exposed);
  const [from, to] = [end(line, -1), end(line, 1)];
  const inside = (place: number): number => min(max(place, from), to);
  const low = attachment <= 0 ? from : inside(line.placeOf(attachment));
  const high = inside(line.placeOf(attachment + limit));
  const density = (x: number): number => exp(line.logDensity(x));
  const weight = (x: number): number[] => [density(x)];
  const [below = 0] = integrals(weight, from, low, line.width);
  const [above = 0] = integrals(weight, high, to, line.width);
  const recovered = (x: number): number[] => {
    const [d, y] = [density(x), line.loss(x) - attachment];
    return [d, d * y];
  };
  const [within = 0, partly = 0] = integrals(recovered, low, high, line.width);
  const whole = below + within + above;
  const average = (partly + limit * above) / whole;
  const scattered = (x: number): number[] => {
    const off = line.loss(x) - attachment - average;
    return [density(x) * off * off];
  };
  const [scatter = 0] = integrals(scattered, low, high, line.width);
  const over = above === 0 ? 0 : limit - average;
  return {
    mean: average,
    deviation: sqrt((scatter + below * average * average + above * over * over) / whole),
    reached: (within + above) / whole,
  };
}
