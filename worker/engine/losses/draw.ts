import { normalQuantile } from '../math/normal';
import type { PreparedTable } from '../model/prepare';
import { PURPOSE } from '../random/keys';
import type { Occurrences } from '../random/occurrences';
import { philox, uniform52 } from '../random/philox';
import { lossAt } from './severity';

/**
 * Adds a table's losses to `losses`, one entry an occurrence, contract currency. The score of a loss is
 * √c·z + √(1−c)·v: z the occurrence's, met by every table, and v drawn for this table and this occurrence alone.
 * Losses that cannot reach the lowest attachment are left out.
 */
export function addLosses(losses: Float64Array, table: PreparedTable, occurrences: Occurrences, block: number): void {
  const words = new Uint32Array(4);
  const { rowOfEvent, firstEvent, severities, commonWeight, ownWeight, scoreThreshold, key0, key1, toContractCurrency } = table;
  const events = rowOfEvent.length;
  for (let i = 0; i < occurrences.count; i += 1) {
    const event = (occurrences.event[i] ?? 0) - firstEvent;
    if (event < 0 || event >= events) continue;
    const row = rowOfEvent[event] ?? -1;
    if (row < 0) continue;
    const severity = severities[row];
    if (severity === undefined) continue;
    let score = (commonWeight[row] ?? 0) * (occurrences.score[i] ?? 0);
    const own = ownWeight[row] ?? 0;
    if (own > 0 && severity.kind !== 'certain') {
      philox(words, occurrences.ordinal[i] ?? 0, block, PURPOSE.table, 0, key0[row] ?? 0, key1[row] ?? 0);
      score += own * normalQuantile(uniform52(words[0] ?? 0, words[1] ?? 0));
    }
    if (score > (scoreThreshold[row] ?? 0)) losses[i] = (losses[i] ?? 0) + lossAt(severity, score) * toContractCurrency;
  }
}
