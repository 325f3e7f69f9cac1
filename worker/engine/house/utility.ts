import exp from '@stdlib/math-base-special-exp';
import expm1 from '@stdlib/math-base-special-expm1';
import ln from '@stdlib/math-base-special-ln';
import log1p from '@stdlib/math-base-special-log1p';

/** Power utility u(k) = (k^(1−γ) − 1)/(1−γ), logarithmic at γ = 1, going on as a straight line of slope φ^(−γ) below φ. */
export interface Preferences {
  /** γ, relative risk aversion, 0 or more. */
  readonly riskAversion: number;
  /** φ, capital share, above 0. */
  readonly floor: number;
}

/** u′(k) = max(k, φ)^(−γ). */
export function marginalUtility(k: number, { riskAversion, floor }: Preferences): number {
  return exp(-riskAversion * ln(k > floor ? k : floor));
}

function smoothGain(k: number, change: number, riskAversion: number): number {
  const growth = log1p(change / k);
  const power = 1 - riskAversion;
  if (power === 0) return growth;
  return (exp(power * ln(k)) * expm1(power * growth)) / power;
}

/** u(k + change) − u(k) without cancellation, also where change is tiny or γ is near 1. Any real k and change. */
export function utilityGain(k: number, change: number, preferences: Preferences): number {
  const { riskAversion, floor } = preferences;
  const end = k + change;
  if (k >= floor && end >= floor) return smoothGain(k, change, riskAversion);
  const slope = marginalUtility(floor, preferences);
  if (k < floor && end < floor) return slope * change;
  return k >= floor
    ? smoothGain(k, floor - k, riskAversion) + slope * (end - floor)
    : slope * (floor - k) + smoothGain(floor, end - floor, riskAversion);
}
