import { BLOCK_STATES, type Catalogue } from '../model/inputs';
import { inventedCatalogue } from '../testing/invented';
import { catalogueKeys, drawOccurrences, type Occurrences } from './occurrences';

const SEED = '0123456789abcdef';
const draw = (catalogue: Catalogue, block = 0): Occurrences =>
  drawOccurrences([{ catalogue, keys: catalogueKeys(catalogue, SEED), firstEvent: 0, rate: catalogue.ratePerYear }], block, BLOCK_STATES, 1);

/** One line an occurrence, by the event's name. */
function lines(catalogue: Catalogue, drawn: Occurrences): string[] {
  return Array.from(drawn.state, (state, i) => {
    const event = catalogue.eventNames[drawn.event[i] ?? 0] ?? '';
    return [event, state, drawn.day[i], drawn.score[i], drawn.ordinal[i]].join(' ');
  }).sort();
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

  it('come in order of state and day, within the year, at the catalogue’s rate', () => {
    const drawn = draw(catalogue);
    for (let i = 1; i < drawn.count; i += 1) {
      const [a, b] = [drawn.state[i - 1] ?? 0, drawn.state[i] ?? 0];
      expect(a < b || (a === b && (drawn.day[i - 1] ?? 0) <= (drawn.day[i] ?? 0))).toBe(true);
    }
    expect(Math.min(...drawn.day)).toBeGreaterThanOrEqual(0);
    expect(Math.max(...drawn.day)).toBeLessThan(365);
    const expected = 2.5 * BLOCK_STATES;
    expect(Math.abs(drawn.count - expected)).toBeLessThan(4 * Math.sqrt(expected));
    const meanScore = drawn.score.reduce((a, b) => a + b, 0) / drawn.count;
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
      for (const state of draw(grouped, block).state) counts[block * BLOCK_STATES + state] = (counts[block * BLOCK_STATES + state] ?? 0) + 1;
    }
    const mean = counts.reduce((a, b) => a + b, 0) / counts.length;
    const variance = counts.reduce((a, b) => a + (b - mean) * (b - mean), 0) / (counts.length - 1);
    expect(Math.abs(mean - 2)).toBeLessThan(4 * Math.sqrt(3.6 / counts.length));
    expect(Math.abs(variance / mean - 1.8)).toBeLessThan(0.06);
  });
});
