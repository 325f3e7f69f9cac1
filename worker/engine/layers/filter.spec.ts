import fc from 'fast-check';
import type { BlockLosses } from '../model/blocks';
import type { LayerTerms } from '../model/layer';
import { catalogueKeys } from '../random/occurrences';
import { inventedCatalogue, inventedLayer } from '../testing/invented';
import { eachYear, PaidYears } from './each-year';
import { allowedEvents } from './filter';
import { LayerYear } from './layer-year';

const layer = (limit: number, attachment: number, over: Partial<LayerTerms> = {}): LayerTerms =>
  inventedLayer('tested', limit, attachment, over);

/** Of each paying year: its state, Z, ρ, ΣY, and from where to where its losses are. */
function told({ paying, ...columns }: PaidYears): number[][] {
  const { state, payoff, reinstatement, counted, from, to } = columns;
  return Array.from({ length: paying }, (_unused, i) =>
    [state, payoff, reinstatement, counted, from, to].map((column) => column[i] ?? Number.NaN),
  );
}

describe('filters by peril and region', () => {
  const seed = '0123456789abcdef';
  const keyed = (
    lineage: string,
    firstEvent: number,
    perils: string[],
    perilIndex: number[],
    regionIndex: number[],
  ) => {
    const catalogue = {
      ...inventedCatalogue(perilIndex.length, 1, lineage),
      perils,
      perilIndex: Uint16Array.from(perilIndex),
      regions: ['north', 'south'],
      regionIndex: Uint16Array.from(regionIndex),
    };
    return { catalogue, keys: catalogueKeys(catalogue, seed), firstEvent, rate: catalogue.ratePerYear };
  };
  const catalogues = [
    keyed('first', 0, ['wind', 'quake'], [0, 0, 1, 1], [0, 1, 0, 1]),
    // Another order of names: a filter goes by name.
    keyed('second', 4, ['quake', 'wind'], [0, 1], [1, 1]),
  ];
  const allowed = (over: Partial<LayerTerms>): number[] | null => {
    const found = allowedEvents({ catalogues, events: 6 }, layer(5, 10, over));
    return found === null ? null : [...found];
  };

  it.each([
    ['nothing said', {}, null],
    ['a peril', { perils: ['wind'] }, [1, 1, 0, 0, 0, 1]],
    ['two perils', { perils: ['quake', 'wind'] }, [1, 1, 1, 1, 1, 1]],
    ['a region', { regions: ['south'] }, [0, 1, 0, 1, 1, 1]],
    ['both', { perils: ['quake'], regions: ['south'] }, [0, 0, 0, 1, 1, 0]],
    ['what no catalogue has', { perils: ['hail'] }, [0, 0, 0, 0, 0, 0]],
    ['an empty list', { regions: [] }, [0, 0, 0, 0, 0, 0]],
  ])('cover the events of both catalogues: %s', (_name, over, expected) =>
    expect(allowed(over)).toEqual(expected),
  );

  /** Year 3: wind 14, quake 30, wind 13; year 7: quake 30 alone. */
  const losses: BlockLosses = {
    count: 4,
    state: Uint16Array.of(3, 3, 3, 7),
    event: Uint32Array.of(0, 2, 1, 3),
    day: Float64Array.of(10, 20, 30, 40),
    loss: Float64Array.of(14, 30, 13, 30),
  };
  const years = (terms: LayerTerms): { sums: number[]; counts: number[]; told: number[][] } => {
    const out = new PaidYears(10);
    const counts = new Float64Array(losses.count);
    eachYear(out, new LayerYear(terms), losses, allowedEvents({ catalogues, events: 6 }, terms), counts);
    return { sums: [out.countedSum, out.countedSquares], counts: [...counts], told: told(out) };
  };

  it('leave out of a year what is not covered (own arithmetic)', () => {
    expect(years(layer(5, 10, { perils: ['wind'] }))).toEqual({
      sums: [7, 49],
      counts: [4, 0, 3, 0],
      told: [[3, 7, 1, 7, 0, 3]],
    });
    expect(years(layer(5, 10)).told).toEqual([
      [3, 10, 1, 12, 0, 3],
      [7, 5, 1, 5, 3, 4],
    ]);
  });

  it('keep what is not covered from qualifying as an event', () => {
    const terms = layer(5, 10, { form: { kind: 'nth event', first: 2, qualifying: 10 } });
    expect(years({ ...terms, perils: ['wind'] }).counts).toEqual([0, 0, 3, 0]);
    expect(years(terms).counts).toEqual([0, 5, 3, 0]);
  });
});

describe('a plain excess of loss', () => {
  it('is the same by its own short way as occurrence by occurrence', () => {
    const loss = fc.oneof(fc.double({ min: 0, max: 30, noNaN: true }), fc.constantFrom(0, 10, 15, 25, 37.5));
    const year = fc.array(loss, { maxLength: 5 });
    const terms = fc.record({
      annualDeductible: fc.constantFrom(0, 2),
      reinstatements: fc.constantFrom([], [1], [0.5, 2]),
      quotaShareKept: fc.constantFrom(1, 0.4),
    });
    fc.assert(
      fc.property(fc.array(year, { maxLength: 30 }), terms, (years, over) => {
        const state = Uint16Array.from(years.flatMap((own, s) => own.map(() => s)));
        const block: BlockLosses = {
          count: state.length,
          state,
          event: new Uint32Array(state.length),
          day: Float64Array.from(state.keys()),
          loss: Float64Array.from(years.flat()),
        };
        // A filter that lets all pass takes the long way.
        const [short, long] = [null, Uint8Array.of(1)].map((allowed) => {
          const out = new PaidYears(30);
          const counts = new Float64Array(state.length);
          eachYear(out, new LayerYear(layer(5, 10, over)), block, allowed, counts);
          const paid = told(out).map((figures) => figures.slice(0, 4));
          return { paid, counts: [...counts], sums: [out.countedSum, out.countedSquares] };
        });
        expect(short).toEqual(long);
      }),
      { seed: 5, numRuns: 300 },
    );
  });
});
