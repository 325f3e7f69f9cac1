import { jStat } from 'jstat';
import { ln } from '../math/ln';
import { EngineInputError, demand } from '../model/refusal';
import { FittedPremiums, type CalibratedHouse, type PastDeal } from './fitted';
import { minimise } from './minimise';

export interface CalibrationOptions {
  /** Range of γ that is searched; 0 to 30 where left out. */
  readonly least?: number;
  readonly most?: number;
}

export interface Calibration {
  /** γ at which the deals' premiums are fitted best. */
  readonly riskAversion: number;
  /** β that anchors m there. */
  readonly discount: number;
  /** Σ weight·ln(observed/fitted)². */
  readonly objective: number;
  readonly deals: readonly { readonly name: string; readonly observed: number; readonly fitted: number; /** ln(observed/fitted). */ readonly residual: number }[];
  /** The objective over the whole range searched. */
  readonly profile: readonly { readonly riskAversion: number; readonly objective: number }[];
  /**
   * Range of γ whose objective is at most 1 + t²/(n − 1) times the least, t the 97.5% quantile of Student's law with n − 1
   * degrees of freedom: the usual 95% interval where residuals are alike and independent. Null with a single deal.
   */
  readonly interval: { readonly from: number; readonly to: number } | null;
  readonly evaluations: number;
}

const POINTS = 31;
const TOLERANCE = 1e-8;
/** A unit of γ has to move the fitted premiums by this much, root mean square of the logarithms, or the deals do not tell. */
const LEAST_SENSITIVITY = 1e-3;

/**
 * Risk aversion γ that fits past deals best: the least of Σ weight·ln(observed/fitted)² over marginal premiums, searched on
 * a grid and then, about its best point, by Brent's method. The grid keeps a second minimum from passing for the first.
 * @throws EngineInputError where the deals cannot tell: none pays, their premiums hardly move with γ, or none in the range fits
 */
export function calibrate(deals: readonly PastDeal[], house: CalibratedHouse, { least = 0, most = 30 }: CalibrationOptions = {}): Calibration {
  demand(least >= 0 && least < most && most < Infinity, 'The range of risk aversion', `${least} to ${most}`, 'rising, from 0 or more');
  const premiums = new FittedPremiums(deals, house);
  if (!premiums.pays) throw new EngineInputError('None of the deals pays in any state: they say nothing of risk aversion.');
  const objective = (riskAversion: number): number =>
    premiums.at(riskAversion).reduce((sum, fitted, d) => {
      const residual = ln((deals[d]?.observedPremium ?? 0) / fitted);
      return sum + (deals[d]?.weight ?? 1) * residual * residual;
    }, 0);
  const step = (most - least) / (POINTS - 1);
  const profile = Array.from({ length: POINTS }, (_unused, i) => ({ riskAversion: least + i * step, objective: objective(least + i * step) }));
  const best = profile.reduce((found, point, i) => (point.objective < (profile[found]?.objective ?? Infinity) ? i : found), 0);
  const found = minimise(objective, Math.max(least, least + (best - 1) * step), Math.min(most, least + (best + 1) * step), TOLERANCE);
  checkTold(premiums, found.x, { least, most });
  const fitted = premiums.at(found.x);
  return {
    riskAversion: found.x,
    discount: premiums.discount,
    objective: found.value,
    deals: deals.map(({ name, observedPremium }, d) => ({ name, observed: observedPremium, fitted: fitted[d] ?? 0, residual: ln(observedPremium / (fitted[d] ?? 0)) })),
    profile,
    interval: deals.length < 2 ? null : intervalOf(objective, found, deals.length, { least, most }),
    evaluations: premiums.evaluations,
  };
}

/** Refuses a least that the deals do not pin down. */
function checkTold(premiums: FittedPremiums, riskAversion: number, { least, most }: { least: number; most: number }): void {
  const [from, to] = [Math.max(least, riskAversion - 0.5), Math.min(most, riskAversion + 0.5)];
  const [lower, upper] = [premiums.at(from), premiums.at(to)];
  const moved = lower.map((premium, d) => ln((upper[d] ?? 0) / premium) / (to - from));
  const sensitivity = Math.sqrt(moved.reduce((sum, x) => sum + x * x, 0) / moved.length);
  if (!(sensitivity >= LEAST_SENSITIVITY)) {
    throw new EngineInputError(
      `A unit of risk aversion moves the deals' premiums by ${(100 * sensitivity).toFixed(4)}% only: they do not pay in lean years more than in others, and cannot tell it.`,
      { parameter: 'The sensitivity of the deals', value: sensitivity, bound: `${LEAST_SENSITIVITY} or more` },
    );
  }
  const edge = 1e-6 * (most - least);
  if (riskAversion - least <= edge) {
    throw new EngineInputError(`The deals fit best at ${least}, the lower end of the range: they were as cheap as if lean years did not matter, or cheaper.`, {
      parameter: 'Risk aversion', value: riskAversion, bound: `above ${least}`,
    });
  }
  if (most - riskAversion <= edge) {
    throw new EngineInputError(`The deals fit best at ${most}, the upper end of the range: they were dearer than any risk aversion in it explains.`, {
      parameter: 'Risk aversion', value: riskAversion, bound: `below ${most}`,
    });
  }
}

function intervalOf(objective: (x: number) => number, found: { x: number; value: number }, deals: number, { least, most }: { least: number; most: number }): { from: number; to: number } {
  const quantile: number = jStat.studentt.inv(0.975, deals - 1);
  const bound = found.value * (1 + (quantile * quantile) / (deals - 1));
  /** Where the objective passes the bound between the least and an end, by bisection; the end where it does not. */
  const crossing = (end: number): number => {
    if (objective(end) <= bound) return end;
    let [inside, outside] = [found.x, end];
    for (let i = 0; i < 60 && Math.abs(outside - inside) > TOLERANCE; i += 1) {
      const middle = 0.5 * (inside + outside);
      if (objective(middle) <= bound) inside = middle;
      else outside = middle;
    }
    return inside;
  };
  return { from: crossing(least), to: crossing(most) };
}
