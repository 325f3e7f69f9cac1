import { BLOCK_STATES, type Catalogue } from '../model/inputs';
import { inventedCatalogue } from '../testing/invented';
import { Occurrences, catalogueKeys, drawOccurrences } from './occurrences';

const SEED = '0123456789abcdef';
const draw = (catalogue: Catalogue, block = 0): Occurrences => {
  const drawn = new Occurrences(catalogue.eventNames.length);
  drawOccurrences(drawn, [{ catalogue, keys: catalogueKeys(catalogue, SEED), firstEvent: 0, rate: catalogue.ratePerYear }], block, BLOCK_STATES, 1);
  return drawn;
};

/** One line an occurrence, by the event's name. */
function lines(catalogue: Catalogue, drawn: Occurrences): string[] {
  return catalogue.eventNames
    .flatMap((event, e) => {
      const from = drawn.eventStart[e] ?? 0;
      const to = drawn.eventStart[e + 1] ?? 0;
      return Array.from({ length: to - from }, (_unused, n) => [event, drawn.state[from + n], drawn.day[from + n], drawn.score[from + n], drawn.ordinal[from + n]].join(' '));
    })
    .sort();
}

describe('occurrences', () => {
  const catalogue = inventedCatalogue(20_000, 2.5);
  const before = lines(catalogue, draw(catalogue, 3));

  it('keep every other event in its place when one row of 20,000 changes, is added or goes', () => {
    const ratePerYear = catalogue.ratePerYear.slice();
    ratePerYear[777] = 0.9;
    const after = lines(catalogue, draw({ ...catalogue, ratePerYear }, 3));
    const others = (all: string[]): string[] => all.filter((line) => !line.startsWith('event 777 '));
    expect(others(after)).toEqual(others(before));
    expect(after.length).toBeGreaterThan(before.length + 10_000);
    // A higher rate adds to what was there.
    const kept = new Set(after);
    expect(before.filter((line) => !kept.has(line))).toEqual([]);
  });

  it('do not depend on where a row stands in its file', () => {
    const reversed = <A>(items: ArrayLike<A>): A[] => Array.from(items).reverse();
    const turned: Catalogue = {
      ...catalogue,
      eventNames: reversed(catalogue.eventNames),
      ratePerYear: catalogue.ratePerYear.slice().reverse(),
      seasonDay: catalogue.seasonDay.slice().reverse(),
    };
    expect(lines(turned, draw(turned, 3))).toEqual(before);
  });

  it('fall within the year, at the catalogue’s rate, with standard normal scores', () => {
    const drawn = draw(catalogue);
    const days = drawn.day.subarray(0, drawn.count);
    expect(Math.min(...days)).toBeGreaterThanOrEqual(0);
    expect(Math.max(...days)).toBeLessThan(365);
    const expected = 2.5 * BLOCK_STATES;
    expect(Math.abs(drawn.count - expected)).toBeLessThan(4 * Math.sqrt(expected));
    const meanScore = drawn.score.subarray(0, drawn.count).reduce((a, b) => a + b, 0) / drawn.count;
    expect(Math.abs(meanScore)).toBeLessThan(4 / Math.sqrt(drawn.count));
  });

  it('of a group have the mean and the variance that its ratio asks for', () => {
    const size = 200;
    const grouped: Catalogue = {
      ...inventedCatalogue(size, 2),
      groups: [{ name: 'storms', varianceToMean: 1.8 }],
      groupIndex: new Int32Array(size).fill(0),
    };
    const counts = new Float64Array(4 * BLOCK_STATES);
    for (let block = 0; block < 4; block += 1) {
      const drawn = draw(grouped, block);
      for (const state of drawn.state.subarray(0, drawn.count)) counts[block * BLOCK_STATES + state] = (counts[block * BLOCK_STATES + state] ?? 0) + 1;
    }
    const mean = counts.reduce((a, b) => a + b, 0) / counts.length;
    const variance = counts.reduce((a, b) => a + (b - mean) * (b - mean), 0) / (counts.length - 1);
    expect(Math.abs(mean - 2)).toBeLessThan(4 * Math.sqrt(3.6 / counts.length));
    expect(Math.abs(variance / mean - 1.8)).toBeLessThan(0.06);
  });
});
