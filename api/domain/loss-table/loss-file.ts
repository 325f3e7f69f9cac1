import { FileProblems } from '../files/file-problems';
import { MOST_ROWS, placesOf, rowOf, type Columns, type Places, type Row, type TableReader } from '../files/table';

/** A row of a loss table: what a portfolio loses when the event happens, in the table's currency. */
export interface LossFileRow {
  readonly event: string;
  readonly meanLoss: number;
  readonly sd: number;
  /** Share of the severity score's variance that all loss tables have in common. */
  readonly commonShare: number;
  /** The most that can be lost; null: no bound, and the loss is lognormal. */
  readonly exposedValue: number | null;
}

const COLUMNS: Columns = { required: ['event', 'mean_loss', 'sd', 'common_share'], optional: ['exposed_value'] };
const LARGEST_AMOUNT = 1e15;
/** The smallest amount that anybody loses; below it a unit is mistaken. */
const SMALLEST_AMOUNT = 0.01;
/** Below this share of its mean a deviation means certainty, and the laws would be needles. */
const SMALLEST_VARIATION = 1e-4;
/** A lognormal wider than this is a mistaken unit, and its tail would be made of a handful of states. */
const LARGEST_VARIATION = 100;
/** How far below the bound of a damage ratio's variance the square of sd must stay, so that rounding decides nothing. */
const CLEAR_OF_BOUND = 1 - 1e-9;

/** Reads and judges the rows of a loss table against the events that its catalogue knows. */
export class LossFile implements TableReader<readonly LossFileRow[]> {
  readonly problems = new FileProblems();
  private readonly rows: LossFileRow[] = [];
  private readonly lineOf = new Map<string, number>();
  private places: Places | null = null;
  private width = 0;

  /**
   * @param knows whether the catalogue version has an event
   * @param catalogue how that version is called, for the message
   */
  constructor(
    private readonly knows: (event: string) => boolean,
    private readonly catalogue: string,
  ) {}

  header(fields: readonly string[]): boolean {
    this.places = placesOf(fields, COLUMNS, this.problems);
    this.width = fields.length;
    return this.places !== null;
  }

  row(line: number, fields: readonly string[]): void {
    const row = this.places === null ? null : rowOf(line, fields, this.width, this.places, this.problems);
    if (row === null) return;
    const event = this.eventName(row);
    const amount = { atLeast: 0, atMost: LARGEST_AMOUNT };
    const meanLoss = row.number('mean_loss', amount);
    const sd = row.number('sd', amount);
    const commonShare = row.number('common_share', { atLeast: 0, atMost: 1 });
    const hasBound = row.raw('exposed_value') !== '';
    const exposedValue = hasBound ? row.number('exposed_value', { above: 0, atMost: LARGEST_AMOUNT }) : null;
    if (meanLoss !== null && sd !== null && !(hasBound && exposedValue === null)) judgeMoments(row, meanLoss, sd, exposedValue);
    if (event === null || meanLoss === null || sd === null || commonShare === null || this.problems.count > 0) return;
    this.rows.push({ event, meanLoss, sd, commonShare, exposedValue });
  }

  end(): readonly LossFileRow[] {
    if (this.places !== null && this.problems.count === 0) {
      if (this.rows.length === 0) this.problems.add(1, null, null, 'has a header and no rows');
      else if (this.rows.every(({ meanLoss }) => meanLoss === 0)) this.problems.add(1, 'mean_loss', null, 'is 0 on every row: there is nothing to lose');
      if (this.rows.length > MOST_ROWS) this.problems.add(MOST_ROWS + 2, null, null, `has more than ${MOST_ROWS} rows`);
    }
    return this.rows;
  }

  private eventName(row: Row): string | null {
    const event = row.text('event', 100);
    if (event === null) return null;
    const first = this.lineOf.get(event);
    if (first !== undefined) return row.fault('event', `stands on line ${first} already; each event stands once`);
    this.lineOf.set(event, row.line);
    return this.knows(event) ? event : row.fault('event', `is not an event of ${this.catalogue}`);
  }
}

/** Refuses moments that no distribution of the kind has; they are never bent into shape in silence. */
function judgeMoments(row: Row, mean: number, sd: number, exposed: number | null): void {
  if (mean > 0 && mean < SMALLEST_AMOUNT) row.fault('mean_loss', `must be 0, or ${SMALLEST_AMOUNT} or more`);
  else if (sd > 0 && sd < SMALLEST_VARIATION * mean) row.fault('sd', `must be 0, or ${SMALLEST_VARIATION} times mean_loss or more`);
  else if (mean === 0 && sd > 0) row.fault('sd', 'must be 0 where mean_loss is 0: a loss is never negative');
  else if (exposed !== null && mean > exposed) row.fault('mean_loss', `must not be above the exposed_value of ${exposed}`);
  else if (exposed !== null && sd > 0 && sd * sd >= mean * (exposed - mean) * CLEAR_OF_BOUND) {
    const most = Math.sqrt(mean * (exposed - mean));
    row.fault('sd', `must be below ${Number(most.toPrecision(6))}: no loss between 0 and ${exposed} with a mean of ${mean} varies as much`);
  } else if (exposed === null && sd > LARGEST_VARIATION * mean) {
    row.fault('sd', `must not be above ${LARGEST_VARIATION} times mean_loss`);
  }
}
