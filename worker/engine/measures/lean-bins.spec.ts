import fc from 'fast-check';
import type { House } from '../house/house';
import { marginalUtility } from '../house/utility';
import { DECILES, leanBins, lensEdges } from './lean-bins';

const preferences = { riskAversion: 4, floor: 0.25 };

function houseOf(capital: Float64Array): House {
  const slope = capital.map((k) => marginalUtility(k, preferences));
  const slopeSum = slope.reduce((a, b) => a + b, 0);
  return { states: capital.length, capital, slope, slopeSum } as unknown as House;
}

/** Rank of each state in the lean order, by a plain sort: capital rising, ties by number. */
function ranks(capital: Float64Array): number[] {
  const order = [...capital.keys()].sort((a, b) => (capital[a] ?? 0) - (capital[b] ?? 0) || a - b);
  const rank = new Array<number>(capital.length).fill(0);
  order.forEach((state, r) => (rank[state] = r));
  return rank;
}

function mean(states: readonly number[], of: Float64Array): number {
  return states.reduce((sum, s) => sum + (of[s] ?? 0), 0) / states.length;
}

function check(capital: Float64Array): void {
  const house = houseOf(capital);
  const { states } = house;
  const decile = new Uint8Array(states);
  const lensBin = new Uint8Array(states);
  const bins = leanBins(house, decile, lensBin);
  const rank = ranks(capital);
  const edges = lensEdges(states);
  const tenthOf = (r: number): number =>
    Array.from({ length: DECILES }, (_unused, d) => Math.floor(((d + 1) * states) / DECILES)).findIndex(
      (end) => r < end,
    );
  expect([...decile]).toEqual(rank.map(tenthOf));
  expect([...lensBin]).toEqual(rank.map((r) => edges.findIndex(({ to }) => r < to)));
  edges.forEach(({ from, to }, b) => {
    const members = rank.flatMap((r, s) => (r >= from && r < to ? [s] : []));
    expect(lensBin.reduce((n, own) => n + (own === b ? 1 : 0), 0)).toBe(to - from);
    const hunger = mean(members, house.slope) / (house.slopeSum / states);
    expect(Math.abs((bins.lens[b]?.hunger ?? 0) / hunger - 1)).toBeLessThan(1e-12);
    expect(Math.abs((bins.lens[b]?.meanCapital ?? Infinity) - mean(members, capital))).toBeLessThan(1e-11);
  });
  for (let d = 0; d < DECILES; d += 1) {
    const members = rank.flatMap((r, s) => (tenthOf(r) === d ? [s] : []));
    expect(decile.reduce((n, own) => n + (own === d ? 1 : 0), 0)).toBe(members.length);
    expect(Math.abs((bins.deciles[d]?.meanCapital ?? Infinity) - mean(members, capital))).toBeLessThan(1e-11);
  }
}

describe('the edges of the lean lens', () => {
  it.each([1000, 1001, 9999, 16_384, 500_000, 10_000_000])(
    'of %p states join without gap or overlap and end with all',
    (states) => {
      const edges = lensEdges(states);
      expect(edges[0]).toMatchObject({ from: 0 });
      expect(edges[edges.length - 1]).toMatchObject({ to: states, shareTo: 1 });
      edges.forEach(({ from, to, shareFrom, shareTo, width }, b) => {
        expect(to).toBeGreaterThan(from);
        expect(Math.floor(shareTo * states)).toBe(to);
        expect(Math.abs(width - Math.log(shareTo / shareFrom))).toBeLessThan(1e-12);
        if (b === 0) return;
        expect({ from, shareFrom }).toEqual({ from: edges[b - 1]?.to, shareFrom: edges[b - 1]?.shareTo });
      });
    },
  );

  it('stand even in the logarithm of the share, twelve a decade, where states are many', () => {
    const widths = lensEdges(10_000_000).map(({ width }) => width);
    expect(widths).toHaveLength(48);
    for (const width of widths) expect(Math.abs(width / (Math.log(10) / 12) - 1)).toBeLessThan(1e-9);
  });
});

describe('tenths and bins of the lean order', () => {
  it('are those of a plain sort, ties by number, every part of its exact size', () => {
    // Most states share the capital of a year without loss, as in a book of catastrophe cover.
    const capital = fc.oneof(
      { weight: 4, arbitrary: fc.constantFrom(1.05, 1.05, 1.05, 1.02, 0.9) },
      { weight: 2, arbitrary: fc.double({ min: -2, max: 1.06, noNaN: true }) },
      { weight: 1, arbitrary: fc.constantFrom(0, -0, 0.25, 1.0500000000000003) },
    );
    fc.assert(
      fc.property(fc.array(capital, { minLength: 1000, maxLength: 1700, size: 'max' }), (ks) =>
        check(Float64Array.from(ks)),
      ),
      { seed: 11, numRuns: 12 },
    );
  });

  it.each([
    ['all alike', () => 1.05],
    ['two levels that meet on an edge', (i: number) => (i % 10 === 0 ? 0.5 : 1.05)],
    ['two levels that meet off every edge', (i: number) => (i % 7 === 0 ? 0.5 : 1.05)],
    ['already in order', (i: number) => 0.5 + i * 1e-4],
    ['in the opposite order', (i: number) => 0.5 - i * 1e-4],
    ['a level across several edges', (i: number) => (i < 40 ? 0.1 : i < 700 ? 0.6 : 1 + i * 1e-6)],
  ])('are exact where capital is %s', (_name, of) =>
    check(Float64Array.from({ length: 1234 }, (_unused, i) => of(i))),
  );
});
