import type { Cell } from '../csv/csv';

/** One column of a table: what it sorts, finds and copies by, and how it is written. */
export interface DataColumn<T> {
  readonly key: string;
  readonly header: string;
  /** Unit of its figures, said in the header. */
  readonly unit?: string;
  readonly value: (row: T) => Cell;
  /** What is shown; absent: the value itself. For more than text, project a `lyCell`. */
  readonly text?: (row: T) => string;
  /** In the mono face, aligned at the right. */
  readonly figures?: boolean;
}

export type Direction = 'asc' | 'desc';

export interface Order {
  readonly key: string;
  readonly direction: Direction;
}

export function textOf<T>(column: DataColumn<T>, row: T): string {
  const text = column.text?.(row) ?? column.value(row);
  return text === null ? '–' : String(text);
}

/** Rows in order; those without a value come last either way, and equals keep their order. */
export function ordered<T>(
  rows: readonly T[],
  column: DataColumn<T>,
  direction: Direction,
  locale: string,
): readonly T[] {
  const words = new Intl.Collator(locale, { numeric: true, sensitivity: 'base' });
  const sign = direction === 'asc' ? 1 : -1;
  return [...rows].sort((left, right) => {
    const a = column.value(left);
    const b = column.value(right);
    if (a === null || b === null) return a === b ? 0 : a === null ? 1 : -1;
    return (
      sign * (typeof a === 'number' && typeof b === 'number' ? a - b : words.compare(String(a), String(b)))
    );
  });
}

/** Rows of which some column says every word looked for. */
export function found<T>(rows: readonly T[], columns: readonly DataColumn<T>[], find: string): readonly T[] {
  const words = find.toLowerCase().split(/\s+/).filter(Boolean);
  if (words.length === 0) return rows;
  return rows.filter((row) => {
    const text = columns
      .map((column) => `${textOf(column, row)} ${String(column.value(row) ?? '')}`.toLowerCase())
      .join('\n');
    return words.every((word) => text.includes(word));
  });
}
