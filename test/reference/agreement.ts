import type { RunResult } from '../../api/contract/runs';
import type { Valuation } from '../../worker/engine';
import type { Estimate, ScipyValuation } from './scipy';

/** Two independent simulations may differ by this many standard errors of their difference. */
const MOST_ERRORS = 4;

/** What two valuations say of one figure, and how far apart they are in standard errors of the difference. */
export interface Compared {
  readonly figure: string;
  readonly ours: number;
  readonly theirs: number;
  readonly errors: number;
}

export function compared(figure: string, ours: Estimate, theirs: Estimate): Compared {
  const spread = Math.sqrt(ours.standardError ** 2 + theirs.standardError ** 2);
  const gap = ours.value - theirs.value;
  return { figure, ours: ours.value, theirs: theirs.value, errors: gap === 0 ? 0 : gap / spread };
}

/** Figures without an error of their own on our side take that of the same figure in the other run, scaled by the states. */
function borrowed(value: number, of: Estimate, states: { ours: number; theirs: number }): Estimate {
  return { value, standardError: of.standardError * Math.sqrt(states.theirs / states.ours) };
}

/** What a house would lose in 1 of `years`, before the programme. */
function tail({ house }: Valuation | RunResult, years: number): number {
  for (const point of house.tailBefore)
    if (point.years === years) return ('loss' in point ? point.loss : point.value) ?? Number.NaN;
  return Number.NaN;
}

/** Every figure that SciPy's valuation shares with the engine's, or with a run read over the API. */
export function comparison(ours: Valuation | RunResult, theirs: ScipyValuation): Compared[] {
  const states = { ours: ours.states, theirs: theirs.states };
  const layers = ours.layers.flatMap((layer, l) => {
    const other = theirs.layers[l];
    if (other?.key !== layer.key) throw new Error(`SciPy has no layer ${layer.key}`);
    const part = theirs.programme.walkAway.parts[l] ?? { value: Number.NaN, standardError: 0 };
    const priced = layer.split.risklessLoss + layer.split.leanLoad;
    return [
      compared(`${layer.key}: expected loss`, layer.expectedLoss, other.expectedLoss),
      compared(
        `${layer.key}: attachment probability`,
        layer.attachmentProbability,
        other.attachmentProbability,
      ),
      compared(
        `${layer.key}: expected reinstatement`,
        layer.expectedReinstatement,
        other.expectedReinstatement,
      ),
      compared(`${layer.key}: E[m·Z]`, borrowed(priced, other.pricedLoss, states), other.pricedLoss),
      compared(`${layer.key}: marginal premium`, layer.marginalPremium, other.marginalPremium),
      compared(`${layer.key}: walk-away premium`, layer.walkAwayPremium, other.walkAwayPremium),
      compared(
        `${layer.key}: part of the programme walk-away`,
        borrowed(layer.programmeWalkAwayPart, part, states),
        part,
      ),
    ];
  });
  const { total } = theirs.programme.walkAway;
  const { oneIn100, oneIn250, largestSharpeRatio } = theirs.house;
  return [
    ...layers,
    compared('programme walk-away', ours.programme.walkAwayPremium, total),
    compared('house, 1 in 100', borrowed(tail(ours, 100), oneIn100, states), oneIn100),
    compared('house, 1 in 250', borrowed(tail(ours, 250), oneIn250, states), oneIn250),
    compared(
      'largest Sharpe ratio',
      borrowed(ours.house.largestSharpeRatio, largestSharpeRatio, states),
      largestSharpeRatio,
    ),
  ];
}

/** Those that are further apart than chance explains; empty where the two agree. */
export function disagreements(figures: readonly Compared[]): Compared[] {
  return figures.filter(({ errors }) => !(Math.abs(errors) <= MOST_ERRORS));
}
