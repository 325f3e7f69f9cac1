/** Return periods at which exceedance is reported; 1 in N is a yearly probability of 1/N (common practice). */
export const RETURN_PERIODS = [2, 5, 10, 20, 50, 100, 200, 250, 500, 1000] as const;

export interface TailPoint {
  readonly years: number;
  /** The (S/N + 1)-th largest yearly figure; null where the grid is too short to say. */
  readonly value: number | null;
  /** value + N·E[(X − value)+], the mean of the worst 1/N of years. */
  readonly tailValue: number | null;
}

/** Value and tail value at each return period. `figures`: one a state, any order; states are equally likely. */
export function exceedance(figures: Float64Array, periods: readonly number[]): TailPoint[] {
  const ascending = figures.slice().sort();
  const states = ascending.length;
  return periods.map((years) => {
    const above = Math.floor(states / years);
    if (above < 10) return { years, value: null, tailValue: null };
    const value = ascending[states - 1 - above] ?? 0;
    let excess = 0;
    for (let i = states - above; i < states; i += 1) excess += (ascending[i] ?? 0) - value;
    return { years, value, tailValue: value + (years * excess) / states };
  });
}
