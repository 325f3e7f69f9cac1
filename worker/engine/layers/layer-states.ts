import type { BlockResult } from '../model/blocks';
import { BLOCK_STATES } from '../model/inputs';
import type { LayerTerms } from '../model/layer';
import type { Allocate } from '../model/memory';
import { PaidYears, eachYear } from './each-year';
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

/** Told of each block: its paying years, and what each of its losses counted for. */
export type Visit = (block: BlockResult, years: PaidYears, counts: Float64Array) => void;

class Growing {
  length = 0;
  state = new Uint32Array(4096);
  payoff = new Float64Array(4096);
  reinstatement = new Float64Array(4096);

  add(first: number, years: PaidYears): void {
    const end = this.length + years.paying;
    if (end > this.state.length) {
      const room = Math.max(end, 2 * this.state.length);
      const { state, payoff, reinstatement } = this;
      this.state = new Uint32Array(room);
      this.state.set(state);
      this.payoff = new Float64Array(room);
      this.payoff.set(payoff);
      this.reinstatement = new Float64Array(room);
      this.reinstatement.set(reinstatement);
    }
    for (let n = 0; n < years.paying; n += 1) this.state[this.length + n] = first + (years.state[n] ?? 0);
    this.payoff.set(years.payoff.subarray(0, years.paying), this.length);
    this.reinstatement.set(years.reinstatement.subarray(0, years.paying), this.length);
    this.length = end;
  }
}

/**
 * Takes a layer through every year of every block.
 * @param allowed 1 for each event that the layer covers; null: all
 */
export function layerStates(terms: LayerTerms, blocks: readonly BlockResult[], allowed: Uint8Array | null, allocate: Allocate, visit?: Visit): LayerStates {
  const year = new LayerYear(terms);
  const years = new PaidYears(BLOCK_STATES);
  const most = blocks.reduce((n, { losses }) => Math.max(n, losses.count), 0);
  const counts = visit === undefined ? null : new Float64Array(most);
  const found = new Growing();
  const blockStart = new Uint32Array(allocate(4 * (blocks.length + 1)));
  let countedSum = 0;
  let countedSquares = 0;
  blocks.forEach((block, b) => {
    eachYear(years, year, block.losses, allowed, counts);
    if (counts !== null) visit?.(block, years, counts);
    found.add(block.index * BLOCK_STATES, years);
    blockStart[b + 1] = found.length;
    countedSum += years.countedSum;
    countedSquares += years.countedSquares;
  });
  const { length } = found;
  const state = new Uint32Array(allocate(4 * length));
  const payoff = new Float64Array(allocate(8 * length));
  const reinstatement = new Float64Array(allocate(8 * length));
  state.set(found.state.subarray(0, length));
  payoff.set(found.payoff.subarray(0, length));
  reinstatement.set(found.reinstatement.subarray(0, length));
  return { blockStart, state, payoff, reinstatement, countedSum, countedSquares };
}
