import { exp } from '../math/exp';
import { normalQuantile } from '../math/normal';
import type { PreparedTable } from '../model/prepare';
import { PURPOSE } from '../random/keys';
import type { Occurrences } from '../random/occurrences';
import { philox, uniform52 } from '../random/philox';
import { CERTAIN, LOGNORMAL, betaOfRow, type Laws } from './laws';
import { LAW_KNOTS, RANGE, logitFromKnots } from './quantile-table';
import { betaAtScore } from './severity';

/** No score is beyond: the quantile of the least uniform number that the generator makes is −8.21. */
const LARGEST_SCORE = 8.3;

/** The loss of a row at a normal score, table currency. */
export function lossOfRow(laws: Laws, table: PreparedTable, row: number, score: number): number {
  const at = table.firstRow + row;
  const kind = table.kind[row];
  if (kind === CERTAIN) return laws.parameters[2 * at] ?? 0;
  if (kind === LOGNORMAL) return exp((laws.parameters[2 * at] ?? 0) + (laws.parameters[2 * at + 1] ?? 0) * score);
  const slot = table.slot[row] ?? -1;
  const exposed = table.exposedValue[row] ?? 0;
  const knots = slot * LAW_KNOTS;
  if (slot >= 0 && score <= RANGE && score >= -RANGE && laws.knots[knots] === laws.knots[knots]) {
    return exposed / (1 + exp(-logitFromKnots(laws.knots, knots, score)));
  }
  return exposed * betaAtScore(betaOfRow(laws, at), score);
}

/**
 * Adds a table's losses to `losses`, one entry an occurrence, contract currency. The score of a loss is
 * √c·z + √(1−c)·v: z the occurrence's, met by every table, and v drawn for this table and this occurrence alone.
 * Losses that cannot exceed the lowest attachment are left out, where the table says so.
 */
export function addLosses(losses: Float64Array, table: PreparedTable, laws: Laws, occurrences: Occurrences, block: number): void {
  const words = new Uint32Array(4);
  const { rowOfEvent, firstEvent, firstRow, kind, commonWeight, ownWeight, key0, key1, toContractCurrency } = table;
  const { eventStart, score: scores, ordinal } = occurrences;
  for (let event = 0; event < rowOfEvent.length; event += 1) {
    const row = rowOfEvent[event] ?? -1;
    if (row < 0) continue;
    const from = eventStart[firstEvent + event] ?? 0;
    const to = eventStart[firstEvent + event + 1] ?? 0;
    if (from === to) continue;
    const threshold = laws.threshold[firstRow + row] ?? 0;
    const common = commonWeight[row] ?? 0;
    const own = kind[row] === CERTAIN ? 0 : (ownWeight[row] ?? 0);
    const reach = threshold - own * LARGEST_SCORE;
    for (let i = from; i < to; i += 1) {
      let score = common * (scores[i] ?? 0);
      if (score <= reach) continue;
      if (own > 0) {
        philox(words, ordinal[i] ?? 0, block, PURPOSE.table, 0, key0[row] ?? 0, key1[row] ?? 0);
        score += own * normalQuantile(uniform52(words[0] ?? 0, words[1] ?? 0));
      }
      if (score > threshold) losses[i] = (losses[i] ?? 0) + lossOfRow(laws, table, row, score) * toContractCurrency;
    }
  }
}
