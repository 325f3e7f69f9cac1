import { addLosses } from '../losses/draw';
import type { Laws } from '../losses/laws';
import type { BlockLosses } from '../model/blocks';
import type { PreparedContract } from '../model/prepare';
import type { Scratch } from './scratch';

/** Draws a contract's loss in every occurrence of the block into the scratch, and lists those that can count; returns their number. */
export function drawLosses(scratch: Scratch, contract: PreparedContract, laws: Laws, block: number): number {
  const { occurrences } = scratch;
  scratch.losses.fill(0, 0, occurrences.count);
  for (const table of contract.tables) addLosses(scratch.losses, scratch.draws, table, laws, occurrences, block);
  const { losses, event, place } = scratch;
  const { eventStart } = occurrences;
  let count = 0;
  for (let e = 0; e + 1 < eventStart.length; e += 1) {
    const to = eventStart[e + 1] ?? 0;
    for (let i = eventStart[e] ?? 0; i < to; i += 1) {
      const loss = losses[i] ?? 0;
      if (loss <= 0 || loss < contract.reach) continue;
      event[count] = e;
      place[count] = i;
      count += 1;
    }
  }
  return count;
}

/** Copies the listed losses in order of state and day; of one day, by their events' ranks and then in the order of their draw. */
export function pickLosses(into: BlockLosses, scratch: Scratch, states: number): void {
  const { occurrences, losses, event, place, order, starts, rank } = scratch;
  const { state, day } = occurrences;
  const { count } = into;
  starts.fill(0);
  for (let n = 0; n < count; n += 1) {
    const s = state[place[n] ?? 0] ?? 0;
    starts[s + 1] = (starts[s + 1] ?? 0) + 1;
  }
  for (let s = 0; s < states; s += 1) starts[s + 1] = (starts[s + 1] ?? 0) + (starts[s] ?? 0);
  const ends = starts.slice(0, states);
  for (let n = 0; n < count; n += 1) {
    const i = place[n] ?? 0;
    const s = state[i] ?? 0;
    const first = starts[s] ?? 0;
    let at = ends[s] ?? 0;
    ends[s] = at + 1;
    const own = day[i] ?? 0;
    const ownRank = rank[event[n] ?? 0] ?? 0;
    while (at > first) {
      const other = order[at - 1] ?? 0;
      const otherDay = day[place[other] ?? 0] ?? 0;
      if (otherDay < own || (otherDay === own && (rank[event[other] ?? 0] ?? 0) <= ownRank)) break;
      order[at] = other;
      at -= 1;
    }
    order[at] = n;
  }
  for (let at = 0; at < count; at += 1) {
    const n = order[at] ?? 0;
    const i = place[n] ?? 0;
    into.state[at] = state[i] ?? 0;
    into.event[at] = event[n] ?? 0;
    into.day[at] = day[i] ?? 0;
    into.loss[at] = losses[i] ?? 0;
  }
}
