import { betaLaw } from '../math/beta';
import { allowedEvents } from '../layers/filter';
import { severityOfRow } from '../losses/laws';
import { exceedanceOf, limitedMean, type Severity } from '../losses/severity';
import type { LayerTerms } from '../model/layer';
import type { Prepared } from '../model/prepare';
import type { Estimate } from './sums';

/** More standard errors than this between simulated and exact, and the run cannot be quoted. */
export const MOST_ERRORS = 4;

export interface SelfCheck {
  /** Simulated against exact E[ΣX] of the programme, in standard errors; null where there is nothing to compare. */
  readonly groundUp: number | null;
  /** The same of what each layer counts before annual terms; null also where no exact value is known. */
  readonly layers: readonly (number | null)[];
  readonly largest: number;
  readonly flagged: boolean;
}

/** Exact means a year, contract currency. */
export interface ExactMeans {
  readonly groundUp: number;
  readonly layers: readonly number[];
}

/** Whether the exact mean of a layer before annual terms is a sum over events: not where the order or the sum of losses counts. */
function hasExactMean(prepared: Prepared, layer: LayerTerms): boolean {
  const { tables } = prepared.programme;
  const summed = new Set(tables.map((table) => table.firstEvent)).size < tables.length;
  return !summed && layer.form?.kind !== 'nth event' && (layer.inuringCovers ?? []).length === 0;
}

/** E of what an occurrence counts for before annual terms, table currency, from E[min(X, d)] and P(X > d). */
function countedMean(severity: Severity, layer: LayerTerms, rate: number, limited: (d: number) => number): number {
  const kept = layer.quotaShareKept ?? 1;
  const toTable = 1 / (rate * kept);
  if (layer.form?.kind !== 'aggregate') {
    return kept * (limited((layer.attachment + layer.limit) * toTable) - limited(layer.attachment * toTable));
  }
  const { threshold, cap, counts } = layer.form;
  const t = threshold * toTable;
  const most = cap === null ? severity.mean : limited(cap * toTable);
  const over = kept * (most - limited(t));
  if (counts === 'over it' || threshold === 0) return over;
  const reached = severity.kind === 'certain' ? (severity.mean >= t ? 1 : 0) : exceedanceOf(severity, t).probability;
  return over + kept * t * reached;
}

/** Σ rate·E over the rows `from` to `to` of all the programme's tables, counted through. */
export function exactMeans(prepared: Prepared, from: number, to: number): ExactMeans {
  const { tables, layers } = prepared.programme;
  const allowed = layers.map((layer) => (hasExactMean(prepared, layer) ? { events: allowedEvents(prepared, layer) } : null));
  const sums = layers.map(() => 0);
  let groundUp = 0;
  for (const table of tables) {
    const exchange = table.toContractCurrency;
    table.rowOfEvent.forEach((row, event) => {
      const number = table.firstRow + row;
      if (row < 0 || number < from || number >= to) return;
      const rate = (table.home.rate[event] ?? 0) * exchange;
      const severity = severityOfRow(table, row);
      groundUp += rate * severity.mean;
      const law = severity.kind === 'beta' ? betaLaw(severity.a, severity.b) : undefined;
      const known = new Map<number, number>();
      const limited = (d: number): number => {
        const before = known.get(d);
        if (before !== undefined) return before;
        const value = limitedMean(severity, d, law);
        known.set(d, value);
        return value;
      };
      layers.forEach((layer, l) => {
        const covers = allowed[l];
        if (covers === null || covers === undefined || (covers.events !== null && covers.events[table.firstEvent + event] !== 1)) return;
        sums[l] = (sums[l] ?? 0) + rate * countedMean(severity, layer, exchange, limited);
      });
    });
  }
  return { groundUp, layers: sums };
}

function distance(simulated: number, exact: number, standardError: number): number | null {
  if (exact === 0 && simulated === 0) return null;
  if (standardError === 0) return simulated === exact ? 0 : null;
  return (simulated - exact) / standardError;
}

/**
 * Compares what was simulated with what is known exactly: the yearly mean loss Σ rate·mean, and each layer's mean before
 * annual terms Σ rate·E[Y] by incomplete beta functions or the normal law.
 * @param groundUp simulated yearly mean loss
 * @param counted by layer: Σ and Σ of squares over the states of what its occurrences counted for
 */
export function selfCheck(prepared: Prepared, parts: readonly ExactMeans[], groundUp: Estimate, counted: readonly { sum: number; squares: number }[]): SelfCheck {
  const { states } = prepared.inputs.grid;
  const exact = (of: (part: ExactMeans) => number): number => parts.reduce((sum, part) => sum + of(part), 0);
  const layers = prepared.programme.layers.map((layer, l) => {
    if (!hasExactMean(prepared, layer)) return null;
    const { sum = 0, squares = 0 } = counted[l] ?? {};
    const average = sum / states;
    const variance = Math.max(squares - sum * average, 0) / (states - 1);
    return distance(average, exact((part) => part.layers[l] ?? 0), Math.sqrt(variance / states));
  });
  const ground = distance(groundUp.value, exact((part) => part.groundUp), groundUp.standardError);
  const known = [ground, ...layers].filter((errors): errors is number => errors !== null);
  const largest = known.reduce((most, errors) => Math.max(most, Math.abs(errors)), 0);
  return { groundUp: ground, layers, largest, flagged: largest > MOST_ERRORS };
}
