export interface Estimate {
  readonly value: number;
  /** Of the Monte Carlo figure, same unit. */
  readonly standardError: number;
}

/** Σ term(i) over places 0..n − 1 of blocks that start at `blockStart`, summed within each block and the blocks' sums in order. */
export function sumByBlock(blockStart: Uint32Array, term: (place: number) => number): number {
  let total = 0;
  for (let b = 0; b + 1 < blockStart.length; b += 1) {
    const to = blockStart[b + 1] ?? 0;
    let sum = 0;
    for (let i = blockStart[b] ?? 0; i < to; i += 1) sum += term(i);
    total += sum;
  }
  return total;
}

/** Mean and deviation of a figure over states, from its sum and the sum of its squared distances from the mean. */
export function estimateOf(states: number, sum: number, scatter: number): Estimate & { readonly deviation: number } {
  const deviation = Math.sqrt(Math.max(scatter, 0) / (states - 1));
  return { value: sum / states, deviation, standardError: deviation / Math.sqrt(states) };
}
