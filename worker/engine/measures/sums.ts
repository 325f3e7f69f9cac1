import { BLOCK_STATES } from '../model/inputs';

/**
 * Σ term(s) for s = 0..states−1, summed within each block of 16,384 and the blocks' sums in their order, so that it has
 * the same bytes as sums that were made block by block elsewhere.
 */
export function sumStates(states: number, term: (state: number) => number): number {
  let total = 0;
  for (let from = 0; from < states; from += BLOCK_STATES) {
    const to = Math.min(from + BLOCK_STATES, states);
    let sum = 0;
    for (let s = from; s < to; s += 1) sum += term(s);
    total += sum;
  }
  return total;
}

export interface Estimate {
  readonly value: number;
  /** Of the Monte Carlo figure, same unit. */
  readonly standardError: number;
}

/** Mean of a figure over equally likely states, its standard deviation over states and the standard error of the mean. */
export function moments(states: number, figure: (state: number) => number): Estimate & { readonly deviation: number } {
  const mean = sumStates(states, figure) / states;
  const squares = sumStates(states, (s) => {
    const off = figure(s) - mean;
    return off * off;
  });
  const deviation = Math.sqrt(squares / (states - 1));
  return { value: mean, deviation, standardError: deviation / Math.sqrt(states) };
}
