import { PaidYears } from '../layers/each-year';
import { Draws } from '../losses/draw';
import { BLOCK_STATES } from '../model/inputs';
import { Occurrences } from '../random/occurrences';

/** Memory that a thread uses again for every block: occurrences, their losses, and a list of those that can count. */
export class Scratch {
  readonly occurrences: Occurrences;
  losses = new Float64Array(0);
  event = new Uint32Array(0);
  place = new Uint32Array(0);
  order = new Uint32Array(0);
  readonly draws = new Draws();
  readonly years = new PaidYears(BLOCK_STATES);
  readonly starts = new Uint32Array(BLOCK_STATES + 1);

  /**
   * @param rank of each event, counted through all catalogues: which of two on the same day comes first, by their names and
   *   not by where they stand in their files
   */
  constructor(readonly rank: Uint32Array) {
    this.occurrences = new Occurrences(rank.length);
  }

  /** Room for a figure or two of each occurrence drawn. */
  makeRoom(): void {
    const { count } = this.occurrences;
    if (this.losses.length >= count) return;
    const room = Math.max(count, 65_536) * 2;
    this.losses = new Float64Array(room);
    this.event = new Uint32Array(room);
    this.place = new Uint32Array(room);
    this.order = new Uint32Array(room);
  }
}
