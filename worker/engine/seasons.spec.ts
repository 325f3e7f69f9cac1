import { BLOCK_STATES, type Catalogue, type ValuationInputs } from './model/inputs';
import { catalogueKeys, drawOccurrences, Occurrences } from './random/occurrences';
import { openWorkspace } from './run/value';
import { inventedCatalogue, inventedInputs, inventedTable } from './testing/invented';

const SEED = '00112233445566ff';
const base = inventedInputs({ events: 10, states: 1000, contracts: 0, layers: 1 });

const BLOCKS = 1;
/** Number of a catalogue's occurrences in each state, by the class of their event; events of class −1 are left out. */
function countsBy(
  catalogue: Catalogue,
  rate: Float64Array,
  classes: number,
  classOf: (event: number) => number,
): Float64Array[] {
  const out = new Occurrences(catalogue.eventNames.length);
  const keys = catalogueKeys(catalogue, SEED);
  const found = Array.from({ length: classes }, () => new Float64Array(BLOCKS * BLOCK_STATES));
  for (let block = 0; block < BLOCKS; block += 1) {
    drawOccurrences(out, [{ catalogue, keys, firstEvent: 0, rate }], block, BLOCK_STATES, 1);
    for (let e = 0; e < rate.length; e += 1) {
      const into = found[classOf(e)];
      if (into === undefined) continue;
      for (let i = out.eventStart[e] ?? 0; i < (out.eventStart[e + 1] ?? 0); i += 1) {
        const s = block * BLOCK_STATES + (out.state[i] ?? 0);
        into[s] = (into[s] ?? 0) + 1;
      }
    }
  }
  return found;
}

function counts(catalogue: Catalogue, rate: Float64Array): Float64Array {
  return countsBy(catalogue, rate, 1, () => 0)[0] ?? new Float64Array(0);
}

/** Mean and ratio of variance to mean, with the standard error of each under a negative binomial law of that ratio. */
function moments(found: Float64Array, ratio: number) {
  const n = found.length;
  const mean = found.reduce((a, b) => a + b, 0) / n;
  const central = (power: number): number => found.reduce((a, b) => a + (b - mean) ** power, 0) / n;
  const variance = central(2);
  const meanError = Math.sqrt((ratio * mean) / n);
  const ratioError = Math.sqrt((central(4) - variance * variance) / n) / mean + (ratio * meanError) / mean;
  return { mean, meanError, ratio: variance / mean, ratioError };
}

function expectMoments(found: Float64Array, mean: number, ratio: number): void {
  const m = moments(found, ratio);
  expect({ ...m, off: Math.abs(m.mean - mean) > 4 * m.meanError }).toEqual({ ...m, off: false });
  expect({ ...m, off: Math.abs(m.ratio - ratio) > 4 * m.ratioError }).toEqual({ ...m, off: false });
}

describe('seasons of a group', () => {
  const EVENTS_OF_GROUP = 120;
  const V = 2.2;
  const catalogue: Catalogue = {
    ...inventedCatalogue(EVENTS_OF_GROUP, 3),
    groups: [{ name: 'storms', varianceToMean: V }],
    groupIndex: new Int32Array(EVENTS_OF_GROUP).fill(0),
  };
  const { ratePerYear } = catalogue;

  it('are negative binomial with the group’s ratio of variance to mean', () =>
    expectMoments(counts(catalogue, ratePerYear), 3, V));

  it('of a part that holds share h of the rate have ratio 1 + (V − 1)·h', () => {
    // A half, three tenths and a fifth of the events.
    const part = (e: number): number => (e % 10 < 5 ? 0 : e % 10 < 8 ? 1 : 2);
    countsBy(catalogue, ratePerYear, 3, part).forEach((found, p) => {
      const held = ratePerYear.reduce((sum, own, e) => sum + (part(e) === p ? own : 0), 0);
      expectMoments(found, held, 1 + ((V - 1) * held) / 3);
    });
  });

  it.each([0.4, 1.8])(
    'under a rate factor f keep the shape of the catalogue’s own rates: ratio 1 + (V − 1)·f at f = %p',
    (factor) => {
      const scaled = counts(
        catalogue,
        ratePerYear.map((own) => own * factor),
      );
      expectMoments(scaled, 3 * factor, 1 + (V - 1) * factor);
    },
  );

  it('under a rate factor below 1 are some of those without, state by state', () => {
    const all = counts(catalogue, ratePerYear);
    const some = counts(
      catalogue,
      ratePerYear.map((own) => own * 0.4),
    );
    expect(some.filter((n, s) => n > (all[s] ?? 0)).length).toBe(0);
  });

  it('of a catalogue whose own rates are lower keep the ratio: there the shape is another', () => {
    const lower = { ...catalogue, ratePerYear: ratePerYear.map((own) => own * 0.4) };
    expectMoments(counts(lower, lower.ratePerYear), 1.2, V);
  });

  it('of two groups have nothing to do with one another, and events of none are Poisson', () => {
    const groupIndex = Int32Array.from({ length: EVENTS_OF_GROUP }, (_unused, e) => (e % 3) - 1);
    const both: Catalogue = {
      ...catalogue,
      groups: [
        { name: 'storms', varianceToMean: V },
        { name: 'floods', varianceToMean: 4 },
      ],
      groupIndex,
    };
    const rateOf = (group: number): number =>
      ratePerYear.reduce((sum, own, e) => sum + (groupIndex[e] === group ? own : 0), 0);
    const [none, storms, floods] = countsBy(both, ratePerYear, 3, (e) => (groupIndex[e] ?? 0) + 1);
    if (none === undefined || storms === undefined || floods === undefined)
      throw new Error('three were drawn');
    expectMoments(none, rateOf(-1), 1);
    expectMoments(storms, rateOf(0), V);
    expectMoments(floods, rateOf(1), 4);
    const n = storms.length;
    const [a, b] = [moments(storms, V), moments(floods, 4)];
    const covariance = storms.reduce((sum, x, s) => sum + (x - a.mean) * ((floods[s] ?? 0) - b.mean), 0) / n;
    expect(Math.abs(covariance) / Math.sqrt(a.ratio * a.mean * b.ratio * b.mean)).toBeLessThan(
      4 / Math.sqrt(n),
    );
  });

  it('reach the price through the rate factor: the valuation draws the scaled rates on the unscaled shape', () => {
    const inputs: ValuationInputs = {
      ...base,
      catalogues: [{ ...catalogue, rateFactor: new Float64Array(EVENTS_OF_GROUP).fill(0.4) }],
    };
    const { prepared } = openWorkspace({
      ...inputs,
      programme: { ...inputs.programme, tables: [inventedTable(catalogue, 'p', 80, 1, 7)] },
    });
    const [home] = prepared.catalogues;
    expect(home?.rate).toEqual(ratePerYear.map((own) => own * 0.4));
    expect(home?.keys.groups[0]?.shape).toBeCloseTo(3 / (V - 1), 12);
  });
});
