import { selectRanks } from './select';

/** Return periods at which exceedance is reported; 1 in N is a yearly probability of 1/N (common practice). */
export const RETURN_PERIODS = [2, 5, 10, 20, 50, 100, 200, 250, 500, 1000] as const;

/** Fewer years than this at or beyond a return period and nothing is said of it. */
const FEWEST_YEARS = 10;

export interface TailPoint {
  readonly years: number;
  /** The (S/N + 1)-th largest yearly figure, S/N rounded down; null where fewer than ten years lie beyond it. */
  readonly value: number | null;
  /** Half the distance between the order statistics one binomial deviation to either side of the value. */
  readonly valueError: number | null;
  /** value + N·E[(X − value)+]: the mean of the worst 1/N of years, also where years tie at the value. */
  readonly tailValue: number | null;
  readonly tailValueError: number | null;
}

/**
 * Value and tail value at each return period.
 * @param figures one a state, any order; states are equally likely
 * @param periods return periods N in years, rising, above 1
 */
export function exceedance(figures: Float64Array, periods: readonly number[]): TailPoint[] {
  const states = figures.length;
  const told = periods.filter((years) => Math.floor(states / years) >= FEWEST_YEARS);
  const ranks = told.flatMap((years) => {
    const beyond = Math.floor(states / years);
    const spread = Math.floor(Math.sqrt(beyond * (1 - 1 / years)) + 0.5);
    return [beyond, beyond - spread, Math.min(beyond + spread, states - 1)].map((above) => states - 1 - Math.max(above, 0));
  });
  const selected = selectRanks(figures, ranks);
  const values = told.map((_years, p) => selected[3 * p] ?? 0);
  const excess = new Float64Array(told.length);
  const squares = new Float64Array(told.length);
  const least = values[0] ?? Infinity;
  for (let s = 0; s < states; s += 1) {
    const x = figures[s] ?? 0;
    if (x <= least) continue;
    for (let p = 0; p < values.length; p += 1) {
      const over = x - (values[p] ?? 0);
      if (over <= 0) break;
      excess[p] = (excess[p] ?? 0) + over;
      squares[p] = (squares[p] ?? 0) + over * over;
    }
  }
  return periods.map((years) => {
    const p = told.indexOf(years);
    if (p < 0) return { years, value: null, valueError: null, tailValue: null, tailValueError: null };
    const value = values[p] ?? 0;
    const mean = (excess[p] ?? 0) / states;
    const variance = Math.max((squares[p] ?? 0) / states - mean * mean, 0);
    return {
      years,
      value,
      valueError: 0.5 * ((selected[3 * p + 1] ?? 0) - (selected[3 * p + 2] ?? 0)),
      tailValue: value + years * mean,
      tailValueError: years * Math.sqrt(variance / states),
    };
  });
}
