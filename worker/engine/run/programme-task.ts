import { yearlyCover } from '../layers/payoff';
import { pricedProbability, probabilityOf, THIN_STATES, type PayoffMeasures } from '../measures/layer';
import { estimateOf, sumByBlock, type Estimate } from '../measures/sums';
import { programmeWalkAway } from '../premiums/programme';
import { EngineInputError } from '../model/refusal';
import { dealAt } from './layer-task';
import type { Workspace } from './workspace';

/** All layers together: their payoffs summed for 100% of each, and the walk-away at the written lines. */
export interface ProgrammePart extends Omit<PayoffMeasures, 'expectedReinstatement'> {
  readonly walkAway: Estimate;
  /** Each layer's part of it as a premium for 100%. */
  readonly parts: readonly number[];
}

/** Values the programme as one. @throws EngineInputError where no layer pays in any state */
export function programmeTask(workspace: Workspace): ProgrammePart {
  const { house, layers } = workspace;
  const { states, slope } = house;
  const deals = layers.map((layer, l) => dealAt(workspace, l, layer.paying));
  if (layers.every(({ paying }) => paying.state.length === 0)) {
    throw new EngineInputError('In none of the simulated years does any layer pay: every attachment is beyond what the loss tables can lose. Lower an attachment, look at the tables’ units, or simulate more years.');
  }
  const walkAway = programmeWalkAway(deals, house, layers.map(({ walkAway: { value } }) => value));
  const total = new Float64Array(states);
  const exhausted = new Uint8Array(states);
  for (const { layer, paying } of deals) {
    const cover = yearlyCover(layer);
    paying.state.forEach((s, i) => {
      const payoff = paying.payoff[i] ?? 0;
      total[s] = (total[s] ?? 0) + payoff;
      if (payoff >= cover) exhausted[s] = (exhausted[s] ?? 0) + 1;
    });
  }
  const whole = Uint32Array.of(0, states);
  const sum = sumByBlock(whole, (s) => total[s] ?? 0);
  const mean = sum / states;
  const scatter = sumByBlock(whole, (s) => ((total[s] ?? 0) - mean) * ((total[s] ?? 0) - mean));
  const { value, standardError, deviation } = estimateOf(states, sum, scatter);
  const pays = (s: number): number => ((total[s] ?? 0) > 0 ? 1 : 0);
  const priced = (s: number): number => (slope[s] ?? 0) * (total[s] ?? 0);
  const [first, second] = [sumByBlock(whole, priced), sumByBlock(whole, (s) => priced(s) * priced(s))];
  const effectiveStates = (first * first) / second;
  return {
    expectedLoss: { value, standardError },
    standardDeviation: deviation,
    attachmentProbability: probabilityOf(sumByBlock(whole, pays), states),
    exhaustionProbability: probabilityOf(exhausted.reduce((n, layersDone) => n + (layersDone === deals.length ? 1 : 0), 0), states),
    pricedAttachmentProbability: pricedProbability(house, sumByBlock(whole, (s) => pays(s) * (slope[s] ?? 0)), sumByBlock(whole, (s) => pays(s) * (slope[s] ?? 0) * (slope[s] ?? 0))),
    effectiveStates,
    thin: effectiveStates < THIN_STATES,
    walkAway: walkAway.total,
    parts: walkAway.layers,
  };
}
