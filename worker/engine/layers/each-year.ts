import type { BlockLosses } from '../model/blocks';
import type { LayerYear } from './layer-year';

/** Sums of ΣY, what occurrences counted for before annual terms, over the years of a block. */
export interface CountedSums {
  readonly sum: number;
  readonly squares: number;
}

/**
 * Takes a layer through every year of a block that has an occurrence within its reach.
 * @param allowed 1 for each event that the layer covers; null: all
 * @param counts written at the place of each of the block's losses that was looked at: what it counted for before annual terms
 * @param paid told of each year in which the layer pays: its state within the block, Z, ρ, ΣY, and which of the block's
 *   losses, `from` to `to`, are the year's
 */
export function eachYear(
  year: LayerYear,
  losses: BlockLosses,
  allowed: Uint8Array | null,
  counts: Float64Array | null,
  paid: (state: number, payoff: number, reinstatement: number, counted: number, from: number, to: number) => void,
): CountedSums {
  const { count, state: states, event, day, loss } = losses;
  const { reach } = year;
  let sum = 0;
  let squares = 0;
  for (let i = 0; i < count; ) {
    if ((loss[i] ?? 0) < reach) {
      i += 1;
      continue;
    }
    const state = states[i] ?? 0;
    const from = i;
    year.begin();
    for (; i < count && states[i] === state; i += 1) {
      const x = loss[i] ?? 0;
      const takes = x >= reach && (allowed === null || allowed[event[i] ?? 0] === 1);
      const own = takes ? year.take(x, day[i] ?? 0) : 0;
      if (counts !== null) counts[i] = own;
    }
    const counted = year.summed;
    if (counted === 0) continue;
    sum += counted;
    squares += counted * counted;
    const { payoff } = year;
    if (payoff > 0) paid(state, payoff, year.reinstatement, counted, from, i);
  }
  return { sum, squares };
}
