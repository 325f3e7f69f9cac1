import type { FileProblems } from './file-problems';

/** Most rows that one file may have. */
export const MOST_ROWS = 1_000_000;

export interface Columns {
  readonly required: readonly string[];
  readonly optional: readonly string[];
}

/** Where each column of a file lies; null where the header is no good, which `problems` then says. */
export type Places = ReadonlyMap<string, number>;

/** What reads a table row by row, judges each and gathers what it holds. */
export interface TableReader<T> {
  readonly problems: FileProblems;
  /** Answers whether to go on with the rows. */
  header(fields: readonly string[]): boolean;
  row(line: number, fields: readonly string[]): void;
  /** After the last row: what concerns the file as a whole. */
  end(): T;
}

/** "Mean Loss" and "mean-loss" name the column mean_loss. */
function plainName(field: string): string {
  return field.trim().toLowerCase().replaceAll(/[\s-]+/g, '_');
}

/** Finds the columns by the header's names, in whatever order they stand. */
export function placesOf(fields: readonly string[], columns: Columns, problems: FileProblems): Places | null {
  const known = [...columns.required, ...columns.optional];
  const lone = fields.length === 1 ? (fields[0] ?? '') : '';
  const separator = [';', '\t', '|'].find((mark) => lone.includes(mark));
  if (separator !== undefined) {
    problems.add(1, null, lone, `columns must be separated by commas, not by ${separator === '\t' ? 'tabs' : `"${separator}"`}`);
    return null;
  }
  const places = new Map<string, number>();
  fields.forEach((field, index) => {
    const name = plainName(field);
    if (name === '') problems.add(1, null, null, `column ${index + 1} has no name`);
    else if (!known.includes(name)) problems.add(1, name, field, `is not a column of this file; the columns are ${known.join(', ')}`);
    else if (places.has(name)) problems.add(1, name, field, 'stands twice in the header; it must stand once');
    else places.set(name, index);
  });
  for (const name of columns.required) {
    if (!places.has(name)) problems.add(1, name, null, 'is missing from the header');
  }
  return problems.count === 0 ? places : null;
}

/** A number's bounds, each with the sense of its name. */
export interface Bounds {
  readonly above?: number;
  readonly atLeast?: number;
  readonly atMost?: number;
  readonly whole?: boolean;
}

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

function boundsInWords({ above, atLeast, atMost, whole }: Bounds): string {
  const parts = [
    ...(above === undefined ? [] : [`above ${above}`]),
    ...(atLeast === undefined ? [] : [`${atLeast} or more`]),
    ...(atMost === undefined ? [] : [`${atMost} or less`]),
  ];
  return `must be a ${whole === true ? 'whole ' : ''}number${parts.length > 0 ? `, ${parts.join(' and ')}` : ''}`;
}

function inBounds(value: number, { above, atLeast, atMost, whole }: Bounds): boolean {
  return (
    Number.isFinite(value) &&
    (above === undefined || value > above) &&
    (atLeast === undefined || value >= atLeast) &&
    (atMost === undefined || value <= atMost) &&
    (whole !== true || Number.isInteger(value))
  );
}

/** The fields of one row by their columns' names; what is wrong with one is noted, and it reads as null. */
export class Row {
  constructor(
    readonly line: number,
    private readonly fields: readonly string[],
    private readonly places: Places,
    private readonly problems: FileProblems,
  ) {}

  /** The trimmed text; empty where the column or the field is. */
  raw(column: string): string {
    const place = this.places.get(column);
    return place === undefined ? '' : (this.fields[place] ?? '').trim();
  }

  fault(column: string, message: string): null {
    this.problems.add(this.line, column, this.raw(column), message);
    return null;
  }

  text(column: string, longest: number): string | null {
    const text = this.raw(column);
    if (text === '') return this.fault(column, 'must not be empty');
    if (text.length > longest) return this.fault(column, `must have ${longest} characters at most`);
    if (/\p{Cc}/u.test(text)) return this.fault(column, 'must not hold control characters or line breaks');
    return text;
  }

  number(column: string, bounds: Bounds): number | null {
    const text = this.raw(column);
    if (text === '') return this.fault(column, `must not be empty; it ${boundsInWords(bounds)}`);
    if (!NUMBER.test(text)) {
      const hint = /\d,\d/.test(text) ? ', with a point for decimals and no thousands separators' : '';
      return this.fault(column, `${boundsInWords(bounds)}${hint}`);
    }
    const value = Number(text);
    return inBounds(value, bounds) ? value : this.fault(column, boundsInWords(bounds));
  }
}

/** The row, or null where its number of fields is not the header's. */
export function rowOf(line: number, fields: readonly string[], width: number, places: Places, problems: FileProblems): Row | null {
  if (fields.length === width) return new Row(line, fields, places, problems);
  problems.add(line, null, fields.join(','), `has ${fields.length} fields where the header has ${width}`);
  return null;
}
