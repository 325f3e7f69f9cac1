import { yearlyCover } from '../layers/payoff';
import { pricedProbability, probabilityOf, THIN_STATES, type PayoffMeasures } from '../measures/layer';
import { estimateOf, type Estimate } from '../measures/sums';
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
    for (let i = 0; i < paying.state.length; i += 1) {
      const s = paying.state[i] ?? 0;
      const payoff = paying.payoff[i] ?? 0;
      total[s] = (total[s] ?? 0) + payoff;
      if (payoff >= cover) exhausted[s] = (exhausted[s] ?? 0) + 1;
    }
  }
  let [sum, squares, pays, done, priced, pricedSquares, slopes, slopeSquares] = [0, 0, 0, 0, 0, 0, 0, 0];
  for (let s = 0; s < states; s += 1) {
    const z = total[s] ?? 0;
    if (z === 0) continue;
    const u = slope[s] ?? 0;
    sum += z;
    squares += z * z;
    pays += 1;
    if (exhausted[s] === deals.length) done += 1;
    priced += u * z;
    pricedSquares += u * z * (u * z);
    slopes += u;
    slopeSquares += u * u;
  }
  const { value, standardError, deviation } = estimateOf(states, sum, squares - (sum * sum) / states);
  const effectiveStates = (priced * priced) / pricedSquares;
  return {
    expectedLoss: { value, standardError },
    standardDeviation: deviation,
    attachmentProbability: probabilityOf(pays, states),
    exhaustionProbability: probabilityOf(done, states),
    pricedAttachmentProbability: pricedProbability(house, slopes, slopeSquares),
    effectiveStates,
    thin: effectiveStates < THIN_STATES,
    walkAway: walkAway.total,
    parts: walkAway.layers,
  };
}
