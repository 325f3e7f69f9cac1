import { BLOCK_STATES } from '../model/inputs';
import { estimateOf, type Estimate } from './sums';

/** Mean over all states of a column, its deviation and the standard error of the mean; summed by block, blocks in order. */
export function momentsOf(column: Float64Array): Estimate & { readonly deviation: number } {
  const states = column.length;
  const over = (term: (x: number) => number): number => {
    let total = 0;
    for (let from = 0; from < states; from += BLOCK_STATES) {
      const to = Math.min(from + BLOCK_STATES, states);
      let sum = 0;
      for (let s = from; s < to; s += 1) sum += term(column[s] ?? 0);
      total += sum;
    }
    return total;
  };
  const sum = over((x) => x);
  const mean = sum / states;
  return estimateOf(states, sum, over((x) => (x - mean) * (x - mean)));
}
