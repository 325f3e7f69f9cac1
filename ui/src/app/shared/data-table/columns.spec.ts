import { found, ordered, type DataColumn } from './columns';

interface Row {
  readonly name: string;
  readonly limit: number | null;
}

const name: DataColumn<Row> = { key: 'name', header: 'Layer', value: (row) => row.name };
const limit: DataColumn<Row> = {
  key: 'limit',
  header: 'Limit',
  value: (row) => row.limit,
  text: (row) => `${(row.limit ?? 0) / 1e6}m`,
};
const ROWS: readonly Row[] = [
  { name: 'Layer 10', limit: 5e6 },
  { name: 'layer 2', limit: null },
  { name: 'Layer 1', limit: 25e6 },
];

describe('rows of a table', () => {
  it('sort words by their numbers, whatever their case', () => {
    expect(ordered(ROWS, name, 'asc', 'en').map((row) => row.name)).toEqual([
      'Layer 1',
      'layer 2',
      'Layer 10',
    ]);
  });

  it.each(['asc', 'desc'] as const)('keep what is missing last when sorted %s', (direction) => {
    expect(ordered(ROWS, limit, direction, 'en').at(-1)?.limit).toBeNull();
  });

  it('are found by what they show and by what they hold', () => {
    expect(found(ROWS, [name, limit], '25m layer')).toEqual([ROWS[2]]);
    expect(found(ROWS, [name, limit], '25000000')).toEqual([ROWS[2]]);
    expect(found(ROWS, [name, limit], ' ')).toBe(ROWS);
  });
});
