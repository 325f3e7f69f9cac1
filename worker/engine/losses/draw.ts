import { exp } from '../math/exp';
import { normalQuantiles } from '../math/normal';
import type { PreparedTable } from '../model/prepare';
import { PURPOSE } from '../random/keys';
import type { Occurrences } from '../random/occurrences';
import { philox, uniform52 } from '../random/philox';
import { CERTAIN, LOGNORMAL, betaOfRow, type Laws } from './laws';
import { LAW_KNOTS, RANGE, logitFromKnots } from './quantile-table';
import { betaAtScore } from './severity';

/** No score is beyond: the quantile of the least uniform number that the generator makes is −8.21. */
const LARGEST_SCORE = 8.3;

/** Occurrences of a block whose loss is wanted, row by row; memory that is used again for every table. */
export class Draws {
  /** Place of the occurrence, and its table's own part of the score. */
  place = new Uint32Array(0);
  score = new Float64Array(0);
  /** Rows met, and where each one's draws begin and end. */
  row = new Int32Array(0);
  rowFrom = new Uint32Array(0);
  rows = 0;
  count = 0;

  begin(occurrences: number, rows: number): void {
    this.count = 0;
    this.rows = 0;
    if (this.place.length < occurrences) {
      this.place = new Uint32Array(2 * occurrences);
      this.score = new Float64Array(2 * occurrences);
    }
    if (this.row.length < rows) {
      this.row = new Int32Array(rows);
      this.rowFrom = new Uint32Array(rows + 1);
    }
  }
}

/** Lists the occurrences whose loss can exceed its row's threshold, with the uniform number of their own part of the score. */
function listDraws(draws: Draws, table: PreparedTable, laws: Laws, occurrences: Occurrences, block: number): void {
  const words = new Uint32Array(4);
  const { rowOfEvent, firstEvent, firstRow, kind, commonWeight, ownWeight, key0, key1 } = table;
  const { eventStart, score: scores, ordinal } = occurrences;
  draws.begin(occurrences.count, kind.length);
  const { place, score, row: rows, rowFrom } = draws;
  let count = 0;
  let met = 0;
  for (let event = 0; event < rowOfEvent.length; event += 1) {
    const row = rowOfEvent[event] ?? -1;
    const from = eventStart[firstEvent + event] ?? 0;
    const to = eventStart[firstEvent + event + 1] ?? 0;
    if (row < 0 || from === to) continue;
    const threshold = laws.threshold[firstRow + row] ?? 0;
    const common = commonWeight[row] ?? 0;
    const own = kind[row] === CERTAIN ? 0 : (ownWeight[row] ?? 0);
    const reach = threshold - own * LARGEST_SCORE;
    const before = count;
    for (let i = from; i < to; i += 1) {
      if (common * (scores[i] ?? 0) <= reach) continue;
      if (own > 0) {
        philox(words, ordinal[i] ?? 0, block, PURPOSE.table, 0, key0[row] ?? 0, key1[row] ?? 0);
        score[count] = uniform52(words[0] ?? 0, words[1] ?? 0);
      } else score[count] = 0.5;
      place[count] = i;
      count += 1;
    }
    if (count === before) continue;
    rows[met] = row;
    rowFrom[met] = before;
    met += 1;
  }
  rowFrom[met] = count;
  draws.count = count;
  draws.rows = met;
}

/**
 * Adds a table's losses to `losses`, one entry an occurrence, contract currency. The score of a loss is
 * √c·z + √(1−c)·v: z the occurrence's, met by every table, and v drawn for this table and this occurrence alone.
 * Losses that cannot exceed the lowest attachment are left out, where the table says so.
 */
export function addLosses(losses: Float64Array, draws: Draws, table: PreparedTable, laws: Laws, occurrences: Occurrences, block: number): void {
  listDraws(draws, table, laws, occurrences, block);
  normalQuantiles(draws.score, draws.count);
  const { row: rows, rowFrom } = draws;
  for (let r = 0; r < draws.rows; r += 1) addRow(losses, draws, table, laws, occurrences, rows[r] ?? 0, rowFrom[r] ?? 0, rowFrom[r + 1] ?? 0);
}

/** The losses of one row's draws, `from` to `to`. */
function addRow(losses: Float64Array, draws: Draws, table: PreparedTable, laws: Laws, { score: scores }: Occurrences, row: number, from: number, to: number): void {
  const { place, score } = draws;
  const at = table.firstRow + row;
  const kind = table.kind[row];
  const threshold = laws.threshold[at] ?? 0;
  const common = table.commonWeight[row] ?? 0;
  const own = kind === CERTAIN ? 0 : (table.ownWeight[row] ?? 0);
  const knots = tableOfRow(laws, table, row);
  const exposed = table.exposedValue[row] ?? 0;
  for (let n = from; n < to; n += 1) {
    const i = place[n] ?? 0;
    const s = common * (scores[i] ?? 0) + own * (score[n] ?? 0);
    if (s <= threshold) continue;
    const loss = knots >= 0 && s <= RANGE && s >= -RANGE ? exposed / (1 + exp(-logitFromKnots(laws.knots, knots, s))) : lossOfRow(laws, table, row, s);
    losses[i] = (losses[i] ?? 0) + loss * table.toContractCurrency;
  }
}

/** Where a row's knots begin, −1 where it has none. */
function tableOfRow(laws: Laws, table: PreparedTable, row: number): number {
  const slot = table.slot[row] ?? -1;
  const knots = slot * LAW_KNOTS;
  return slot >= 0 && laws.knots[knots] === laws.knots[knots] ? knots : -1;
}

/** The loss of a row at a normal score, table currency. */
export function lossOfRow(laws: Laws, table: PreparedTable, row: number, score: number): number {
  const at = table.firstRow + row;
  const kind = table.kind[row];
  if (kind === CERTAIN) return laws.parameters[2 * at] ?? 0;
  if (kind === LOGNORMAL) return exp((laws.parameters[2 * at] ?? 0) + (laws.parameters[2 * at + 1] ?? 0) * score);
  const exposed = table.exposedValue[row] ?? 0;
  const knots = tableOfRow(laws, table, row);
  if (knots >= 0 && score <= RANGE && score >= -RANGE) return exposed / (1 + exp(-logitFromKnots(laws.knots, knots, score)));
  return exposed * betaAtScore(betaOfRow(laws, at), score);
}
