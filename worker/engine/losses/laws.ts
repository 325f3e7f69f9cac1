import { betaLaw, type BetaLaw } from '../math/beta';
import { type Allocate, doubles } from '../model/memory';
import { LAW_KNOTS, fillKnots, fitsTable } from './quantile-table';
import { exceedanceOf, severityOf, type Severity } from './severity';

export const CERTAIN = 0;
export const LOGNORMAL = 1;
export const BETA = 2;
const KIND = { certain: CERTAIN, lognormal: LOGNORMAL, beta: BETA } as const;

/** Fewer draws expected than this in a whole run and a table costs more than it saves. */
const FEWEST_DRAWS = 16;

/** Rows of every loss table of a run, counted through, with what drawing from them needs. */
export interface Laws {
  /** Two numbers a row: shapes a and b; location and scale; or the mean and nothing. */
  readonly parameters: Float64Array;
  /** ln B(a, b) of a beta row. */
  readonly logBeta: Float64Array;
  /** Score above which a row's loss exceeds the lowest attachment: −Infinity where every loss is wanted. */
  readonly threshold: Float64Array;
  /** LAW_KNOTS doubles for each row that may have a table; the first is NaN where it has none. */
  readonly knots: Float64Array;
}

export function makeLaws(rows: number, tabled: number, allocate: Allocate): Laws {
  return {
    parameters: doubles(allocate, 2 * rows),
    logBeta: doubles(allocate, rows),
    threshold: doubles(allocate, rows),
    knots: doubles(allocate, LAW_KNOTS * tabled),
  };
}

/** What a table says of its rows, as far as laws need it. */
export interface LawSource {
  readonly meanLoss: Float64Array;
  readonly sd: Float64Array;
  readonly exposedValue: Float64Array;
  /** Number of the first row in the run. */
  readonly firstRow: number;
  /** Attachment below which losses do not matter, table currency; below 0: every loss is wanted. */
  readonly lowestAttachment: number;
  /** Place of each row's knots, −1 where it needs none. */
  readonly slot: Int32Array;
  /** Occurrences expected of each row in the whole run. */
  readonly draws: (row: number) => number;
}

export function severityOfRow(table: Pick<LawSource, 'meanLoss' | 'sd' | 'exposedValue'>, row: number): Severity {
  return severityOf(table.meanLoss[row] ?? 0, table.sd[row] ?? 0, table.exposedValue[row] ?? Number.NaN);
}

/** Kind of a row's law, and whether a run of so many expected draws may want its table. */
export function kindOfRow(severity: Severity, draws: number): { kind: number; mayHaveTable: boolean } {
  return {
    kind: KIND[severity.kind],
    mayHaveTable: severity.kind === 'beta' && draws >= FEWEST_DRAWS && fitsTable(severity.a, severity.b),
  };
}

/** Fits the laws of rows `from` to `to` of a table. Depends on the row alone, so any thread may do any part. */
export function fillLaws(laws: Laws, table: LawSource, from: number, to: number): void {
  for (let row = from; row < to; row += 1) {
    const at = table.firstRow + row;
    const severity = severityOfRow(table, row);
    const above = table.lowestAttachment < 0 ? { probability: 1, score: -Infinity } : exceedanceOf(severity, table.lowestAttachment);
    laws.threshold[at] = above.score;
    const slot = table.slot[row] ?? -1;
    if (slot >= 0) laws.knots[slot * LAW_KNOTS] = Number.NaN;
    if (severity.kind === 'certain') laws.parameters[2 * at] = severity.mean;
    else if (severity.kind === 'lognormal') {
      laws.parameters[2 * at] = severity.location;
      laws.parameters[2 * at + 1] = severity.scale;
    } else {
      laws.parameters[2 * at] = severity.a;
      laws.parameters[2 * at + 1] = severity.b;
      if (!(above.score < Infinity)) continue;
      const law = betaLaw(severity.a, severity.b);
      laws.logBeta[at] = law.logBeta;
      if (slot >= 0 && table.draws(row) * above.probability >= FEWEST_DRAWS) fillKnots(laws.knots, slot * LAW_KNOTS, law);
    }
  }
}

/** The beta law of a row. */
export function betaOfRow(laws: Laws, row: number): BetaLaw {
  return { a: laws.parameters[2 * row] ?? 0, b: laws.parameters[2 * row + 1] ?? 0, logBeta: laws.logBeta[row] ?? 0 };
}
