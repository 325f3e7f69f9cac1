import { FileProblems } from '../files/file-problems';
import { MOST_ROWS, placesOf, rowOf, type Columns, type Places, type Row, type TableReader } from '../files/table';

/** An event of a catalogue as the file states it. Rates are events per year. */
export interface CatalogueFileEvent {
  readonly event: string;
  readonly ratePerYear: number;
  readonly peril: string;
  readonly region: string;
  /** Day of the year, 1 to 365; null: any day alike. */
  readonly seasonDay: number | null;
  /** Events whose yearly counts vary together; null: on its own. */
  readonly group: string | null;
  /** Variance of the group's yearly count ÷ its mean, above 1; null: 1. */
  readonly varianceToMean: number | null;
}

const COLUMNS: Columns = { required: ['event', 'rate_per_year', 'peril', 'region'], optional: ['season_day', 'group', 'variance_to_mean'] };
/** Above these the grid would hold more occurrences than it can carry, and a unit is probably wrong. */
const LARGEST_RATE = 100;
const LARGEST_TOTAL_RATE = 500;
const SMALLEST_RATE = 1e-12;
const LARGEST_VARIANCE_TO_MEAN = 1000;

/** Reads and judges the rows of an event catalogue. */
export class CatalogueFile implements TableReader<readonly CatalogueFileEvent[]> {
  readonly problems = new FileProblems();
  private readonly events: CatalogueFileEvent[] = [];
  private readonly lineOf = new Map<string, number>();
  /** First spelling of each peril, region and group, by its lower case. */
  private readonly spellings = new Map<string, { readonly text: string; readonly line: number }>();
  private readonly ratioOf = new Map<string, { readonly ratio: number; readonly line: number }>();
  private places: Places | null = null;
  private width = 0;
  private total = 0;

  header(fields: readonly string[]): boolean {
    this.places = placesOf(fields, COLUMNS, this.problems);
    this.width = fields.length;
    return this.places !== null;
  }

  row(line: number, fields: readonly string[]): void {
    const row = this.places === null ? null : rowOf(line, fields, this.width, this.places, this.problems);
    if (row === null) return;
    const event = this.eventName(row);
    const ratePerYear = row.number('rate_per_year', { atLeast: SMALLEST_RATE, atMost: LARGEST_RATE });
    const peril = this.word(row, 'peril', 60);
    const region = this.word(row, 'region', 60);
    const seasonDay = row.raw('season_day') === '' ? null : row.number('season_day', { atLeast: 1, atMost: 365, whole: true });
    const { group, varianceToMean } = this.grouping(row);
    this.total += ratePerYear ?? 0;
    if (event === null || ratePerYear === null || peril === null || region === null || this.problems.count > 0) return;
    this.events.push({ event, ratePerYear, peril, region, seasonDay, group, varianceToMean });
  }

  end(): readonly CatalogueFileEvent[] {
    if (this.places !== null && this.problems.count === 0) {
      if (this.events.length === 0) this.problems.add(1, null, null, 'has a header and no events');
      if (this.events.length > MOST_ROWS) this.problems.add(MOST_ROWS + 2, null, null, `has more than ${MOST_ROWS} events`);
      if (this.total > LARGEST_TOTAL_RATE) {
        this.problems.add(1, 'rate_per_year', String(this.total), `the rates add up to more than ${LARGEST_TOTAL_RATE} events a year; check their unit`);
      }
    }
    return this.events;
  }

  private eventName(row: Row): string | null {
    const event = row.text('event', 100);
    if (event === null) return null;
    const first = this.lineOf.get(event);
    if (first !== undefined) return row.fault('event', `stands on line ${first} already; each event stands once`);
    this.lineOf.set(event, row.line);
    return event;
  }

  /** Two spellings of one word would be two perils: zones and prices would then miss half. */
  private word(row: Row, column: string, longest: number): string | null {
    const text = row.text(column, longest);
    if (text === null) return null;
    const key = `${column}:${text.toLowerCase()}`;
    const first = this.spellings.get(key);
    if (first === undefined) this.spellings.set(key, { text, line: row.line });
    else if (first.text !== text) return row.fault(column, `is spelt "${first.text}" on line ${first.line}; spell it alike everywhere`);
    return text;
  }

  private grouping(row: Row): { group: string | null; varianceToMean: number | null } {
    const [hasGroup, hasRatio] = [row.raw('group') !== '', row.raw('variance_to_mean') !== ''];
    if (!hasGroup && hasRatio) row.fault('variance_to_mean', 'belongs to a group, and this event names none');
    if (!hasGroup) return { group: null, varianceToMean: null };
    if (!hasRatio) row.fault('variance_to_mean', 'must not be empty where the event names a group');
    const group = this.word(row, 'group', 100);
    const varianceToMean = hasRatio ? row.number('variance_to_mean', { above: 1, atMost: LARGEST_VARIANCE_TO_MEAN }) : null;
    if (group === null || varianceToMean === null) return { group, varianceToMean };
    const first = this.ratioOf.get(group);
    if (first === undefined) this.ratioOf.set(group, { ratio: varianceToMean, line: row.line });
    else if (first.ratio !== varianceToMean) row.fault('variance_to_mean', `is ${first.ratio} for the same group on line ${first.line}; a group has one`);
    return { group, varianceToMean };
  }
}
