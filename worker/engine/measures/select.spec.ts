import fc from 'fast-check';
import { selectRanks } from './select';

describe('ranks without sorting', () => {
  it('are those of the sorted column, with ties, zeros of both signs and negative numbers', () => {
    const number = fc.oneof(fc.double({ noNaN: true }), fc.constantFrom(0, -0, 1, 1.0000000000000002, -1, 5e-324), fc.double({ min: 1, max: 1.001, noNaN: true }));
    fc.assert(
      fc.property(fc.array(number, { minLength: 1, maxLength: 400 }), (numbers) => {
        const column = Float64Array.from(numbers);
        const ranks = [0, column.length - 1, Math.floor(column.length / 2), Math.floor(column.length / 3), 0];
        const sorted = column.slice().sort();
        expect(selectRanks(column, ranks).map((x) => x + 0)).toEqual(ranks.map((rank) => (sorted[rank] ?? 0) + 0));
      }),
    );
  });

  it('are found among many that crowd at one end, as capital does', () => {
    const column = Float64Array.from({ length: 60_000 }, (_unused, i) => (i % 3 === 0 ? 1.05 : 1.05 - ((i * 0.6180339887498949) % 1) ** 24));
    const ranks = [0, 5, 600, 6000, 20_000, 39_999, 40_000, 59_999];
    const sorted = column.slice().sort();
    expect(selectRanks(column, ranks)).toEqual(ranks.map((rank) => sorted[rank]));
  });
});
