import type { Laws } from '../losses/laws';
import { eachYear, type PaidYears } from '../layers/each-year';
import { allowedEvents } from '../layers/filter';
import { LayerYear } from '../layers/layer-year';
import { newBlock, statesOfBlock, type BlockLosses } from '../model/blocks';
import type { Allocate } from '../model/memory';
import type { Prepared, PreparedContract } from '../model/prepare';
import { drawOccurrences } from '../random/occurrences';
import { drawLosses, pickLosses } from './contract-losses';
import type { Scratch } from './scratch';

function emptyLosses(count: number): BlockLosses {
  return { count, state: new Uint16Array(count), event: new Uint32Array(count), day: new Float64Array(count), loss: new Float64Array(count) };
}

/** Adds what a contract of the book costs the house in each state, house currency: losses with their adjustment, less reinstatement premiums. */
function addBookLoss(bookLoss: Float64Array, years: PaidYears, prepared: Prepared, contract: PreparedContract, losses: BlockLosses): void {
  const { basis } = prepared.inputs;
  contract.layers.forEach((layer, l) => {
    const house = layer.line * contract.toHouseCurrency;
    const kept = 1 - basis.taxes - (layer.brokerageOnReinstatements === true ? layer.brokerage : 0);
    const premium = (contract.premiums[l] ?? 0) * kept;
    const cost = 1 + basis.lossAdjustment;
    eachYear(years, new LayerYear(layer), losses, allowedEvents(prepared, layer), null);
    for (let n = 0; n < years.paying; n += 1) {
      const state = years.state[n] ?? 0;
      bookLoss[state] = (bookLoss[state] ?? 0) + house * ((years.payoff[n] ?? 0) * cost - premium * (years.reinstatement[n] ?? 0));
    }
  });
}

/**
 * Values one block of states: the book's loss, the programme's yearly losses, and its occurrences that can count. Depends on
 * nothing but its inputs and its index, so the bytes are the same whoever works it out, and when.
 * @returns the memory that `blockIn` reads
 */
export function valueBlock(prepared: Prepared, laws: Laws, index: number, allocate: Allocate, scratch: Scratch): ArrayBuffer | SharedArrayBuffer {
  const { grid, programme: terms } = prepared.inputs;
  const states = statesOfBlock(grid.states, index);
  const { occurrences } = scratch;
  drawOccurrences(occurrences, prepared.catalogues, index, states, terms.inceptionDay);
  scratch.makeRoom();
  const bookLoss = new Float64Array(states);
  for (const contract of prepared.book) {
    const losses = emptyLosses(drawLosses(scratch, contract, laws, index));
    pickLosses(losses, scratch, states);
    addBookLoss(bookLoss, scratch.years, prepared, contract, losses);
  }
  const count = drawLosses(scratch, prepared.programme, laws, index);
  const { memory, block } = newBlock(index, states, count, allocate);
  block.bookLoss.set(bookLoss);
  pickLosses(block.losses, scratch, states);
  const { occurrenceLoss, aggregateLoss } = block;
  for (let i = 0; i < occurrences.count; i += 1) {
    const state = occurrences.state[i] ?? 0;
    const loss = scratch.losses[i] ?? 0;
    aggregateLoss[state] = (aggregateLoss[state] ?? 0) + loss;
    if (loss > (occurrenceLoss[state] ?? 0)) occurrenceLoss[state] = loss;
  }
  return memory;
}
