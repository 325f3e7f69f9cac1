import { addLosses } from '../losses/draw';
import type { Laws } from '../losses/laws';
import { eachYear } from '../layers/each-year';
import { LayerYear } from '../layers/layer-year';
import { newBlock, statesOfBlock, type BlockLosses } from '../model/blocks';
import type { HouseBasis } from '../model/inputs';
import type { Allocate } from '../model/memory';
import type { Prepared, PreparedContract } from '../model/prepare';
import { drawOccurrences, type Occurrences } from '../random/occurrences';
import { allowedEvents } from '../layers/filter';

/** Draws a contract's loss in every occurrence into `losses`; returns how many can count. */
function drawLosses(losses: Float64Array, contract: PreparedContract, laws: Laws, occurrences: Occurrences, block: number): number {
  losses.fill(0);
  for (const table of contract.tables) addLosses(losses, table, laws, occurrences, block);
  let count = 0;
  for (const loss of losses) if (loss > 0 && loss >= contract.reach) count += 1;
  return count;
}

/** Copies the losses that can count, in their order. */
function pick(into: BlockLosses, losses: Float64Array, reach: number, occurrences: Occurrences): void {
  let at = 0;
  for (let i = 0; i < losses.length; i += 1) {
    const loss = losses[i] ?? 0;
    if (!(loss > 0 && loss >= reach)) continue;
    into.state[at] = occurrences.state[i] ?? 0;
    into.event[at] = occurrences.event[i] ?? 0;
    into.day[at] = occurrences.day[i] ?? 0;
    into.loss[at] = loss;
    at += 1;
  }
}

function emptyLosses(count: number): BlockLosses {
  return { count, state: new Uint16Array(count), event: new Uint32Array(count), day: new Float64Array(count), loss: new Float64Array(count) };
}

/** Adds what a contract of the book costs the house in each state, house currency: losses with their adjustment, less reinstatement premiums. */
function addBookLoss(bookLoss: Float64Array, prepared: Prepared, contract: PreparedContract, losses: BlockLosses, basis: HouseBasis): void {
  contract.layers.forEach((layer, l) => {
    const house = layer.line * contract.toHouseCurrency;
    const kept = 1 - basis.taxes - (layer.brokerageOnReinstatements === true ? layer.brokerage : 0);
    const premium = (contract.premiums[l] ?? 0) * kept;
    const cost = 1 + basis.lossAdjustment;
    eachYear(new LayerYear(layer), losses, allowedEvents(prepared, layer), null, (state, payoff, reinstatement) => {
      bookLoss[state] = (bookLoss[state] ?? 0) + house * (payoff * cost - premium * reinstatement);
    });
  });
}

/**
 * Values one block of states: the book's loss, the programme's yearly losses, and its occurrences that can count. Depends on
 * nothing but its inputs and its index, so the bytes are the same whoever works it out, and when.
 * @returns the memory that `blockIn` reads
 */
export function valueBlock(prepared: Prepared, laws: Laws, index: number, allocate: Allocate): ArrayBuffer | SharedArrayBuffer {
  const { grid, programme: terms, basis } = prepared.inputs;
  const states = statesOfBlock(grid.states, index);
  const occurrences = drawOccurrences(prepared.catalogues, index, states, terms.inceptionDay);
  const drawn = new Float64Array(occurrences.count);
  const bookLoss = new Float64Array(states);
  for (const contract of prepared.book) {
    const losses = emptyLosses(drawLosses(drawn, contract, laws, occurrences, index));
    pick(losses, drawn, contract.reach, occurrences);
    addBookLoss(bookLoss, prepared, contract, losses, basis);
  }
  const count = drawLosses(drawn, prepared.programme, laws, occurrences, index);
  const { memory, block } = newBlock(index, states, count, allocate);
  block.bookLoss.set(bookLoss);
  pick(block.losses, drawn, prepared.programme.reach, occurrences);
  const { occurrenceLoss, aggregateLoss } = block;
  for (let i = 0; i < occurrences.count; i += 1) {
    const state = occurrences.state[i] ?? 0;
    const loss = drawn[i] ?? 0;
    aggregateLoss[state] = (aggregateLoss[state] ?? 0) + loss;
    if (loss > (occurrenceLoss[state] ?? 0)) occurrenceLoss[state] = loss;
  }
  return memory;
}
