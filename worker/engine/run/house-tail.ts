import { exceedance, type TailPoint } from '../measures/exceedance';
import { dealAt } from './layer-task';
import type { Workspace } from './workspace';

const HOUSE_TAIL_YEARS = [100, 250] as const;

/**
 * The house's catastrophe loss net of reinstatement premiums in its tail, house currency.
 * @param premiums of each layer for 100%, contract currency: with the programme at its written lines; null: without it
 */
export function houseTail(workspace: Workspace, premiums: readonly number[] | null): TailPoint[] {
  const { bookLoss } = workspace.memory.columns;
  if (premiums === null) return exceedance(bookLoss, HOUSE_TAIL_YEARS);
  const after = new Float64Array(bookLoss);
  const { toHouseCurrency } = workspace.prepared.inputs.programme;
  workspace.layers.forEach(({ paying }, l) => {
    const deal = dealAt(workspace, l, paying);
    const line = deal.layer.line * toHouseCurrency;
    const back = (1 - deal.reinstatementDeductions) * (premiums[l] ?? 0);
    for (let i = 0; i < paying.state.length; i += 1) {
      const s = paying.state[i] ?? 0;
      after[s] = (after[s] ?? 0) + line * ((paying.payoff[i] ?? 0) * (1 + deal.lossAdjustment) - back * (paying.reinstatement[i] ?? 0));
    }
  });
  return exceedance(after, HOUSE_TAIL_YEARS);
}
