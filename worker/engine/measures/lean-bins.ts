import { exp } from '../math/exp';
import type { House } from '../house/house';
import { ln } from '../math/ln';
import { BLOCK_STATES } from '../model/inputs';
import { selectRanks } from './select';

const BINS_A_DECADE = 12;
const FIRST_SHARE = 1e-4;
export const DECILES = 10;

/** A bin of the lean lens: states of the lean order from one rank up to another. */
export interface LensEdge {
  readonly shareFrom: number;
  readonly shareTo: number;
  /** Width in natural logarithms of the share of states. */
  readonly width: number;
  readonly from: number;
  readonly to: number;
}

/** Bins even in the logarithm of the share of states at least as lean; the first holds all that are leaner still. */
export function lensEdges(states: number): LensEdge[] {
  const edges: LensEdge[] = [];
  const step = exp(ln(10) / BINS_A_DECADE);
  let from = 0;
  for (let share = FIRST_SHARE * step; from < states; share *= step) {
    const shareTo = share > 1 / Math.sqrt(step) ? 1 : share;
    const to = Math.min(states, Math.floor(shareTo * states));
    if (to <= from) continue;
    const previous = edges[edges.length - 1]?.shareTo;
    edges.push({
      shareFrom: previous ?? shareTo / step,
      shareTo,
      width: previous === undefined ? ln(step) : ln(shareTo / previous),
      from,
      to,
    });
    from = to;
  }
  return edges;
}

/** What the house is like in each bin and tenth of the lean order. */
export interface LeanBins {
  /** Mean m/E[m] and mean k over each bin of the lens. */
  readonly lens: readonly { readonly hunger: number; readonly meanCapital: number }[];
  readonly deciles: readonly { readonly meanCapital: number }[];
}

/**
 * Number of the part, of parts that end at the given ranks, in which each state stands in the lean order. States that share
 * an edge's capital stand by their number: the order is one, and every part has its size.
 */
function partsOf(capital: Float64Array, ends: readonly number[], out: Uint8Array): void {
  const edges = ends.slice(0, -1);
  const values = Float64Array.from(selectRanks(capital, edges));
  const within = new Float64Array(edges.length + 1);
  const level = new Float64Array(edges.length + 1);
  for (let s = 0; s < capital.length; s += 1) {
    const k = capital[s] ?? 0;
    let [low, high] = [0, edges.length];
    while (low < high) {
      const middle = (low + high) >>> 1;
      if ((values[middle] ?? 0) < k) low = middle + 1;
      else high = middle;
    }
    out[s] = low;
    if (values[low] === k) level[low] = (level[low] ?? 0) + 1;
    else within[low] = (within[low] ?? 0) + 1;
  }
  // Rank of the next state to come that is level with an edge: all leaner ones stand before it.
  const rank = new Float64Array(edges.length + 1);
  let before = 0;
  for (let e = 0; e <= edges.length; e += 1) {
    before += within[e] ?? 0;
    rank[e] = before;
    before += level[e] ?? 0;
  }
  for (let s = 0; s < capital.length; s += 1) {
    const edge = out[s] ?? 0;
    if (values[edge] !== capital[s]) continue;
    const own = rank[edge] ?? 0;
    rank[edge] = own + 1;
    let part = edge;
    while (part < edges.length && values[part] === capital[s] && own >= (edges[part] ?? 0)) part += 1;
    out[s] = part;
  }
}

/** Adds sums to their totals and begins them anew. */
function moveInto(totals: Float64Array, sums: Float64Array): void {
  for (let i = 0; i < sums.length; i += 1) totals[i] = (totals[i] ?? 0) + (sums[i] ?? 0);
  sums.fill(0);
}

/** Sorts the states into tenths and into the bins of the lens, leanest first; writes their numbers, one a state. */
export function leanBins(house: House, decile: Uint8Array, lensBin: Uint8Array): LeanBins {
  const { states, capital, slope, slopeSum } = house;
  const edges = lensEdges(states);
  const tenths = Array.from({ length: DECILES }, (_unused, d) => Math.floor(((d + 1) * states) / DECILES));
  // One division of the order serves both: a part lies within one tenth and one bin.
  const ends = [...new Set([...tenths, ...edges.map(({ to }) => to)])].sort((a, b) => a - b);
  const tenthOf = Uint8Array.from(ends, (end) => tenths.findIndex((to) => end <= to));
  const binOf = Uint8Array.from(ends, (end) => edges.findIndex(({ to }) => end <= to));
  partsOf(capital, ends, lensBin);
  const hunger = new Float64Array(edges.length);
  const lensCapital = new Float64Array(edges.length);
  const tenthCapital = new Float64Array(DECILES);
  const blockHunger = new Float64Array(edges.length);
  const blockLensCapital = new Float64Array(edges.length);
  const blockTenthCapital = new Float64Array(DECILES);
  // Within each block and the blocks' sums in order: ten million states in one go would lose digits.
  for (let from = 0; from < states; from += BLOCK_STATES) {
    const to = Math.min(from + BLOCK_STATES, states);
    for (let s = from; s < to; s += 1) {
      const part = lensBin[s] ?? 0;
      const b = binOf[part] ?? 0;
      const d = tenthOf[part] ?? 0;
      const k = capital[s] ?? 0;
      lensBin[s] = b;
      decile[s] = d;
      blockHunger[b] = (blockHunger[b] ?? 0) + (slope[s] ?? 0);
      blockLensCapital[b] = (blockLensCapital[b] ?? 0) + k;
      blockTenthCapital[d] = (blockTenthCapital[d] ?? 0) + k;
    }
    moveInto(hunger, blockHunger);
    moveInto(lensCapital, blockLensCapital);
    moveInto(tenthCapital, blockTenthCapital);
  }
  const meanSlope = slopeSum / states;
  return {
    lens: edges.map(({ from, to }, b) => ({ hunger: (hunger[b] ?? 0) / meanSlope / (to - from), meanCapital: (lensCapital[b] ?? 0) / (to - from) })),
    deciles: tenths.map((to, d) => ({ meanCapital: (tenthCapital[d] ?? 0) / (to - (tenths[d - 1] ?? 0)) })),
  };
}
