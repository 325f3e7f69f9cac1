import { addLosses } from '../losses/draw';
import type { BlockResult, LayerHits } from '../model/blocks';
import { BLOCK_STATES, type HouseBasis, type LayerTerms } from '../model/inputs';
import type { Prepared, PreparedContract } from '../model/prepare';
import { drawOccurrences, type Occurrences } from '../random/occurrences';
import { occurrenceRecovery, reinstatementShare, yearlyPayoff } from './payoff';

function lossesOf(contract: PreparedContract, occurrences: Occurrences, block: number): Float64Array {
  const losses = new Float64Array(occurrences.count);
  for (const table of contract.tables) addLosses(losses, table, occurrences, block);
  return losses;
}

function summedRecoveries(layer: LayerTerms, losses: Float64Array, occurrences: Occurrences, states: number): Float64Array {
  const summed = new Float64Array(states);
  const { limit, attachment } = layer;
  for (let i = 0; i < occurrences.count; i += 1) {
    const loss = losses[i] ?? 0;
    if (loss <= attachment) continue;
    const state = occurrences.state[i] ?? 0;
    summed[state] = (summed[state] ?? 0) + occurrenceRecovery(loss, limit, attachment);
  }
  return summed;
}

function hitsOf(layer: LayerTerms, losses: Float64Array, occurrences: Occurrences): LayerHits {
  let count = 0;
  for (let i = 0; i < occurrences.count; i += 1) if ((losses[i] ?? 0) > layer.attachment) count += 1;
  const hits = { state: new Uint16Array(count), event: new Uint32Array(count), recovery: new Float64Array(count) };
  let at = 0;
  for (let i = 0; i < occurrences.count; i += 1) {
    const loss = losses[i] ?? 0;
    if (loss <= layer.attachment) continue;
    hits.state[at] = occurrences.state[i] ?? 0;
    hits.event[at] = occurrences.event[i] ?? 0;
    hits.recovery[at] = occurrenceRecovery(loss, layer.limit, layer.attachment);
    at += 1;
  }
  return hits;
}

/** What a contract of the book costs the house in each state, house currency: losses with their adjustment, less reinstatement premiums. */
function addBookLoss(bookLoss: Float64Array, contract: PreparedContract, losses: Float64Array, occurrences: Occurrences, basis: HouseBasis): void {
  contract.layers.forEach((layer, l) => {
    const summed = summedRecoveries(layer, losses, occurrences, bookLoss.length);
    const house = layer.line * contract.toHouseCurrency;
    const premium = (contract.premiums[l] ?? 0) * (1 - basis.taxes);
    for (let s = 0; s < bookLoss.length; s += 1) {
      const sum = summed[s] ?? 0;
      if (sum === 0) continue;
      const payoff = yearlyPayoff(sum, layer);
      const net = payoff * (1 + basis.lossAdjustment) - premium * reinstatementShare(payoff, layer);
      bookLoss[s] = (bookLoss[s] ?? 0) + house * net;
    }
  });
}

/**
 * Values one block of states: the book's loss, the layers' payoffs and what the measures need. Depends on nothing but
 * its inputs and its index, so the bytes are the same whoever works it out, and when.
 */
export function valueBlock(prepared: Prepared, index: number): BlockResult {
  const { grid, programme: terms, basis } = prepared.inputs;
  const states = Math.min(BLOCK_STATES, grid.states - index * BLOCK_STATES);
  const occurrences = drawOccurrences(prepared.catalogues, index, states, terms.inceptionDay);
  const bookLoss = new Float64Array(states);
  for (const contract of prepared.book) {
    addBookLoss(bookLoss, contract, lossesOf(contract, occurrences, index), occurrences, basis);
  }
  const losses = lossesOf(prepared.programme, occurrences, index);
  const occurrenceLoss = new Float64Array(states);
  const aggregateLoss = new Float64Array(states);
  for (let i = 0; i < occurrences.count; i += 1) {
    const state = occurrences.state[i] ?? 0;
    const loss = losses[i] ?? 0;
    aggregateLoss[state] = (aggregateLoss[state] ?? 0) + loss;
    if (loss > (occurrenceLoss[state] ?? 0)) occurrenceLoss[state] = loss;
  }
  const { layers } = prepared.programme;
  const recoverySums = new Float64Array(layers.length);
  const recoverySquares = new Float64Array(layers.length);
  const payoffs = layers.map((layer, l) => {
    const summed = summedRecoveries(layer, losses, occurrences, states);
    let sum = 0;
    let squares = 0;
    for (let s = 0; s < states; s += 1) {
      const recovered = summed[s] ?? 0;
      if (recovered === 0) continue;
      sum += recovered;
      squares += recovered * recovered;
      summed[s] = yearlyPayoff(recovered, layer);
    }
    recoverySums[l] = sum;
    recoverySquares[l] = squares;
    return summed;
  });
  const hits = layers.map((layer) => hitsOf(layer, losses, occurrences));
  return { index, states, bookLoss, payoffs, recoverySums, recoverySquares, occurrenceLoss, aggregateLoss, hits };
}
