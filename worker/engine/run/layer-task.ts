import { explainYear, type ExplainedYear } from '../explain/explain';
import { tellingYears } from '../explain/telling-years';
import type { House } from '../house/house';
import { allowedEvents } from '../layers/filter';
import { layerStates, type LayerStates } from '../layers/layer-states';
import { contributors, type Contributors } from '../measures/contributors';
import { payoffMeasures, type PayoffMeasures } from '../measures/layer';
import { payingSums } from '../measures/paying-sums';
import { yearlyCover } from '../layers/payoff';
import { DECILES, lensEdges } from '../measures/lean-bins';
import type { PartSums } from '../measures/lens';
import { BLOCK_STATES } from '../model/inputs';
import { EngineInputError } from '../model/refusal';
import { dealOf, type Deal } from '../premiums/deal';
import { marginalPremium, type MarginalPremium } from '../premiums/marginal';
import { walkAwayPremium } from '../premiums/walk-away';
import type { Estimate } from '../measures/sums';
import type { Workspace } from './workspace';

/** One layer valued by itself. */
export interface LayerPart {
  readonly paying: LayerStates;
  readonly measures: PayoffMeasures;
  readonly marginal: MarginalPremium;
  readonly walkAway: Estimate;
  readonly contributors: Contributors;
  readonly deciles: PartSums;
  readonly lens: PartSums;
  readonly tellingYears: readonly ExplainedYear[];
}

function emptySums(parts: number): PartSums {
  return { payoff: new Float64Array(parts), priced: new Float64Array(parts) };
}

function add(sums: PartSums, part: number, payoff: number, priced: number): void {
  sums.payoff[part] = (sums.payoff[part] ?? 0) + payoff;
  sums.priced[part] = (sums.priced[part] ?? 0) + priced;
}

export function dealAt(workspace: Workspace, index: number, paying: LayerStates): Deal {
  const { basis, programme } = workspace.prepared.inputs;
  const layer = programme.layers[index];
  if (layer === undefined) throw new EngineInputError(`The programme has no layer ${index}.`);
  return dealOf(layer, paying, basis, { layers: programme.layers.length, toHouseCurrency: programme.toHouseCurrency });
}

/** Values one layer: its paying states, their measures and premiums, and who makes the price. */
export function layerTask(workspace: Workspace, index: number): LayerPart {
  const { prepared, memory, allocate } = workspace;
  const { house } = workspace;
  const layer = prepared.programme.layers[index];
  if (layer === undefined) throw new EngineInputError(`The programme has no layer ${index}.`);
  const deciles = emptySums(DECILES);
  const lens = emptySums(lensEdges(house.states).length);
  const byEvent = new Float64Array(prepared.events);
  const { decile, lensBin } = memory.columns;
  const paying = layerStates(layer, workspace.allBlocks(), allowedEvents(prepared, layer), allocate, (block, years, counts) => {
    const { event } = block.losses;
    for (let n = 0; n < years.paying; n += 1) {
      const state = block.index * BLOCK_STATES + (years.state[n] ?? 0);
      const payoff = years.payoff[n] ?? 0;
      const priced = hungerAt(house, state) * payoff;
      add(deciles, decile[state] ?? 0, payoff, priced);
      add(lens, lensBin[state] ?? 0, payoff, priced);
      // A state's payoff is shared among its occurrences in proportion to what they counted for.
      const each = priced / (years.counted[n] ?? 1);
      const to = years.to[n] ?? 0;
      for (let i = years.from[n] ?? 0; i < to; i += 1) {
        const own = counts[i] ?? 0;
        if (own > 0) byEvent[event[i] ?? 0] = (byEvent[event[i] ?? 0] ?? 0) + each * own;
      }
    }
  });
  const deal = dealAt(workspace, index, paying);
  const sums = payingSums(paying, house.slope, yearlyCover(layer));
  const marginal = marginalPremium(deal, sums, house);
  return {
    paying,
    measures: payoffMeasures(deal, sums, house),
    marginal,
    walkAway: walkAwayPremium(deal, house, marginal.premium.value),
    contributors: contributors(prepared, byEvent),
    deciles,
    lens,
    tellingYears: tellingYears(paying, house, lensBin, lens.priced).map((state) => explainYear(workspace.explicable, index, state)),
  };
}

/** m(s). */
export function hungerAt(house: House, state: number): number {
  return house.discount * (house.slope[state] ?? 0);
}
