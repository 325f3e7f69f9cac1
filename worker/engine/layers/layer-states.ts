import type { BlockResult } from '../model/blocks';
import { BLOCK_STATES } from '../model/inputs';
import type { LayerTerms } from '../model/layer';
import type { Allocate } from '../model/memory';
import { eachYear } from './each-year';
import { LayerYear } from './layer-year';

/** The states in which a layer pays, rising; arrays of one length. */
export interface LayerStates {
  /** Place of each block's first paying state, and at the end their number. */
  readonly blockStart: Uint32Array;
  /** State of the grid. */
  readonly state: Uint32Array;
  /** Z, for 100%, contract currency. */
  readonly payoff: Float64Array;
  /** ρ: reinstatement premium as a share of the layer premium. */
  readonly reinstatement: Float64Array;
  /** ΣY before annual terms over all states: its sum and sum of squares, by block in order. */
  readonly countedSum: number;
  readonly countedSquares: number;
}

/** Told of a paying state: its number, Z and ΣY, and the places in `counts` and in its block's losses that are its year's. */
export type Visit = (state: number, payoff: number, counted: number, counts: Float64Array, block: BlockResult, from: number, to: number) => void;

/**
 * The layer kernel: takes a layer through every year of every block.
 * @param allowed 1 for each event that the layer covers; null: all
 */
export function layerStates(terms: LayerTerms, blocks: readonly BlockResult[], allowed: Uint8Array | null, allocate: Allocate, visit?: Visit): LayerStates {
  const year = new LayerYear(terms);
  const within = blocks.map((block) => paidWithin(year, block, allowed, visit));
  const blockStart = new Uint32Array(allocate(4 * (blocks.length + 1)));
  let countedSum = 0;
  let countedSquares = 0;
  within.forEach((part, b) => {
    blockStart[b + 1] = (blockStart[b] ?? 0) + part.state.length;
    countedSum += part.sum;
    countedSquares += part.squares;
  });
  const length = blockStart[blocks.length] ?? 0;
  const state = new Uint32Array(allocate(4 * length));
  const payoff = new Float64Array(allocate(8 * length));
  const reinstatement = new Float64Array(allocate(8 * length));
  within.forEach((part, b) => {
    const at = blockStart[b] ?? 0;
    state.set(part.state, at);
    payoff.set(part.payoff, at);
    reinstatement.set(part.reinstatement, at);
  });
  return { blockStart, state, payoff, reinstatement, countedSum, countedSquares };
}

function paidWithin(year: LayerYear, block: BlockResult, allowed: Uint8Array | null, visit: Visit | undefined) {
  const { states, losses, index } = block;
  const state = new Uint32Array(states);
  const payoff = new Float64Array(states);
  const reinstatement = new Float64Array(states);
  const counts = visit === undefined ? null : new Float64Array(losses.count);
  const first = index * BLOCK_STATES;
  let paying = 0;
  const sums = eachYear(year, losses, allowed, counts, (s, z, rho, counted, from, to) => {
    state[paying] = first + s;
    payoff[paying] = z;
    reinstatement[paying] = rho;
    paying += 1;
    if (counts !== null) visit?.(first + s, z, counted, counts, block, from, to);
  });
  return { ...sums, state: state.slice(0, paying), payoff: payoff.slice(0, paying), reinstatement: reinstatement.slice(0, paying) };
}
