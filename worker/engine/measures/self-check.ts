import { limitedMean } from '../losses/severity';
import type { BlockResult } from '../model/blocks';
import type { Prepared } from '../model/prepare';
import { moments } from './sums';

/** More standard errors than this between simulated and exact, and the run cannot be quoted. */
export const MOST_ERRORS = 4;

export interface SelfCheck {
  /** Simulated against exact E[ΣX] of the programme, in standard errors; null where there is nothing to compare. */
  readonly groundUp: number | null;
  /** The same of E[ΣY] before annual terms, by layer; null also where summed tables have no exact value. */
  readonly layers: readonly (number | null)[];
  readonly largest: number;
  readonly flagged: boolean;
}

/** Σ rate × E[f(X)] over the rows of the programme's tables, contract currency. */
function exactSum(prepared: Prepared, limited: (table: number, row: number) => number): number {
  let total = 0;
  prepared.programme.tables.forEach((table, t) => {
    const home = prepared.catalogues.find(({ firstEvent }) => firstEvent === table.firstEvent);
    table.rowOfEvent.forEach((row, event) => {
      if (row >= 0) total += (home?.catalogue.ratePerYear[event] ?? 0) * limited(t, row);
    });
  });
  return total;
}

function distance(simulated: number, exact: number, standardError: number): number | null {
  if (exact === 0 && simulated === 0) return null;
  if (standardError === 0) return simulated === exact ? 0 : null;
  return (simulated - exact) / standardError;
}

/**
 * Compares what was simulated with what is known exactly: the yearly mean loss Σ rate·mean, and each layer's mean recovery
 * before annual terms Σ rate·E[Y] by incomplete beta functions or the normal law.
 */
export function selfCheck(prepared: Prepared, blocks: readonly BlockResult[], aggregateLoss: Float64Array): SelfCheck {
  const { states } = prepared.inputs.grid;
  const { tables, layers } = prepared.programme;
  const mean = moments(states, (s) => aggregateLoss[s] ?? 0);
  const severityAt = (t: number, row: number) => tables[t]?.severities[row];
  const exactMean = exactSum(prepared, (t, row) => (severityAt(t, row)?.mean ?? 0) * (tables[t]?.toContractCurrency ?? 1));
  const groundUp = distance(mean.value, exactMean, mean.standardError);
  const overlapping = new Set(tables.map((table) => table.firstEvent)).size < tables.length;
  const byLayer = layers.map((layer, l) => {
    if (overlapping) return null;
    let [sum, squares] = [0, 0];
    for (const block of blocks) {
      sum += block.recoverySums[l] ?? 0;
      squares += block.recoverySquares[l] ?? 0;
    }
    const exact = exactSum(prepared, (t, row) => {
      const severity = severityAt(t, row);
      const rate = tables[t]?.toContractCurrency ?? 1;
      if (severity === undefined) return 0;
      return rate * (limitedMean(severity, (layer.attachment + layer.limit) / rate) - limitedMean(severity, layer.attachment / rate));
    });
    const average = sum / states;
    const variance = (squares - sum * average) / (states - 1);
    return distance(average, exact, Math.sqrt(Math.max(variance, 0) / states));
  });
  const known = [groundUp, ...byLayer].filter((errors): errors is number => errors !== null);
  const largest = known.reduce((most, errors) => Math.max(most, Math.abs(errors)), 0);
  return { groundUp, layers: byLayer, largest, flagged: largest > MOST_ERRORS };
}
