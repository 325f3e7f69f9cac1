import { exp } from '../math/exp';
import expm1 from '@stdlib/math-base-special-expm1';
import log1p from '@stdlib/math-base-special-log1p';
import { ln } from '../math/ln';

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

/** u(k + change) − u(k) above the floor, from u′(k): k^(1−γ) = k·u′(k). */
function smoothGain(k: number, slope: number, change: number, riskAversion: number): number {
  const power = 1 - riskAversion;
  const growth = log1p(change / k);
  return power === 0 ? growth : (k * slope * expm1(power * growth)) / power;
}

/** u(k + change) − u(k) without cancellation, also where change is tiny or γ is near 1. Any real k and change. */
export function utilityGain(k: number, change: number, preferences: Preferences): number {
  return utilityGainFrom(k, marginalUtility(k, preferences), change, preferences);
}

/** The same where slope = u′(k) is known already. */
export function utilityGainFrom(k: number, slope: number, change: number, preferences: Preferences): number {
  const { riskAversion, floor } = preferences;
  const end = k + change;
  if (k >= floor && end >= floor) return smoothGain(k, slope, change, riskAversion);
  const floorSlope = marginalUtility(floor, preferences);
  if (k < floor && end < floor) return floorSlope * change;
  return k >= floor
    ? smoothGain(k, slope, floor - k, riskAversion) + floorSlope * (end - floor)
    : floorSlope * (floor - k) + smoothGain(floor, floorSlope, end - floor, riskAversion);
}

const SMALL = 0.05;

/**
 * u′(k + change), where the gain of that change is known: above the floor (k + change)^(1−γ) = k^(1−γ) + (1−γ)·gain, which
 * is exact to doubles for small changes.
 */
export function slopeAfter(k: number, slope: number, change: number, gain: number, preferences: Preferences): number {
  const { riskAversion, floor } = preferences;
  const end = k + change;
  if (riskAversion === 1 || k < floor || end < floor || change > SMALL * k || change < -SMALL * k) return marginalUtility(end, preferences);
  return (k * slope + (1 - riskAversion) * gain) / end;
}
