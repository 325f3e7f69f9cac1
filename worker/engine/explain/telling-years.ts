import type { House } from '../house/house';
import type { LayerStates } from '../layers/layer-states';

/** Years told of each layer. */
export const TOLD_YEARS = 10;

/**
 * The years that tell a layer's price: in the lean order, the years in the middle of each tenth of E[m·Z]. Within a bin of
 * the lean lens years are taken in the order of their numbers.
 * @param pricedByBin Σ m·Z of each bin, leanest first
 * @returns states of the grid, leanest first; none where nothing is paid
 */
export function tellingYears(paying: LayerStates, house: Pick<House, 'slope' | 'discount'>, lensBin: Uint8Array, pricedByBin: Float64Array): number[] {
  const total = pricedByBin.reduce((sum, priced) => sum + priced, 0);
  if (!(total > 0)) return [];
  const found = new Map<number, number>();
  const targets = Array.from(pricedByBin, () => [] as { tenth: number; at: number }[]);
  let before = 0;
  pricedByBin.forEach((priced, bin) => {
    for (let tenth = 0; tenth < TOLD_YEARS; tenth += 1) {
      const at = ((tenth + 0.5) / TOLD_YEARS) * total - before;
      if (at >= 0 && at < priced) targets[bin]?.push({ tenth, at });
    }
    before += priced;
  });
  const passed = new Float64Array(pricedByBin.length);
  for (let i = 0; i < paying.state.length; i += 1) {
    const state = paying.state[i] ?? 0;
    const bin = lensBin[state] ?? 0;
    const wanted = targets[bin];
    if (wanted === undefined || wanted.length === 0) continue;
    const sum = (passed[bin] ?? 0) + house.discount * (house.slope[state] ?? 0) * (paying.payoff[i] ?? 0);
    passed[bin] = sum;
    for (let next = wanted[0]; next !== undefined && next.at < sum; next = wanted[0]) {
      found.set(next.tenth, state);
      wanted.shift();
    }
  }
  return [...new Set([...found].sort(([a], [b]) => a - b).map(([, state]) => state))];
}
