import { prepare, value, type Catalogue, type LossTable } from '.';
import { severityOf } from './losses/severity';
import type { OutsideDomain } from './model/refusal';
import { inventedInputs, inventedLayer } from './testing/invented';
import { outsideOf, refusalOf as refused } from './testing/refusal-of';

const good = inventedInputs({ events: 60, states: 1000, contracts: 1, layers: 1 });
const [goodCatalogue] = good.catalogues;
const [goodTable] = good.programme.tables;
const [goodContract] = good.book;
if (goodCatalogue === undefined || goodTable === undefined || goodContract === undefined)
  throw new Error('the invented inputs have all three');
const events = goodCatalogue.eventNames.length;
const expectOutside = (act: () => unknown, outside: OutsideDomain): void =>
  expect(outsideOf(act)).toEqual(outside);

const withCatalogue = (over: Partial<Catalogue>) => (): unknown =>
  prepare({ ...good, catalogues: [{ ...goodCatalogue, ...over }] });
const withTable = (over: Partial<LossTable>) => (): unknown =>
  prepare({ ...good, programme: { ...good.programme, tables: [{ ...goodTable, ...over }] } });
const filled = (x: number, at: number, rest: number): Float64Array =>
  new Float64Array(events).fill(rest).fill(x, at, at + 1);

/** NaN is outside every bound. */
const not = Number.NaN;

describe('what files are refused for', () => {
  describe('a catalogue', () => {
    const name = 'Catalogue invented-wind';
    it('without events', () =>
      expectOutside(withCatalogue({ eventNames: [], ratePerYear: new Float64Array(0) }), {
        parameter: `The number of events of ${name}`,
        value: 0,
        bound: 'above 0',
      }));

    it.each<[string, Partial<Catalogue>]>([
      ['rates', { ratePerYear: new Float64Array(3).fill(1) }],
      ['perils', { perilIndex: new Uint16Array(3) }],
      ['regions', { regionIndex: new Uint16Array(3) }],
      ['season days', { seasonDay: new Float64Array(3) }],
      ['groups', { groupIndex: new Int32Array(3) }],
      ['rate factors', { rateFactor: new Float64Array(3).fill(1) }],
    ])('whose %s are not one an event', (column, over) =>
      expectOutside(withCatalogue(over), {
        parameter: `The number of ${column} of ${name}`,
        value: 3,
        bound: `its number of events, ${events}`,
      }),
    );

    it.each([0, -1, Infinity, not])('with a rate of %p', (rate) =>
      expectOutside(withCatalogue({ ratePerYear: filled(rate, 5, 0.01) }), {
        parameter: `A rate of ${name}`,
        value: rate,
        bound: 'above 0 and finite',
      }),
    );

    it.each([0, -1, Infinity, not])('with a rate factor of %p', (factor) =>
      expectOutside(withCatalogue({ rateFactor: filled(factor, 5, 1) }), {
        parameter: `A rate factor of ${name}`,
        value: factor,
        bound: 'above 0 and finite',
      }),
    );

    it.each([0, -3, 367, Infinity])('with a season day of %p', (day) =>
      expectOutside(withCatalogue({ seasonDay: filled(day, 5, 1) }), {
        parameter: `A season day of ${name}`,
        value: day,
        bound: 'from 1 to 366',
      }),
    );

    it.each([1, 0.5, Infinity, not])('with a group whose ratio of variance to mean is %p', (varianceToMean) =>
      expectOutside(withCatalogue({ groups: [{ name: 'storms', varianceToMean }] }), {
        parameter: 'The ratio of variance to mean of group storms',
        value: varianceToMean,
        bound: 'above 1',
      }),
    );

    it.each<[string, Partial<Catalogue>]>([
      ['a peril', { perilIndex: new Uint16Array(events).fill(9) }],
      ['a region', { regionIndex: new Uint16Array(events).fill(9) }],
      ['a group', { groupIndex: new Int32Array(events).fill(9) }],
    ])('that numbers %s which it does not name', (of, over) => {
      const refusal = refused(withCatalogue(over));
      expect(refusal.outside).toMatchObject({ value: 9 });
      expect(refusal.message).toContain(of);
    });

    it('in two versions', () => {
      const refusal = refused(() => prepare({ ...good, catalogues: [goodCatalogue, goodCatalogue] }));
      expect(refusal.message).toBe('A run uses one version of a catalogue.');
    });
  });

  describe('a loss table', () => {
    const firstRow = (x: number, of: Float64Array): Float64Array => {
      const changed = of.slice();
      changed[0] = x;
      return changed;
    };

    it('on a catalogue that the run does not have', () =>
      expect(refused(withTable({ catalogueLineage: 'elsewhere' })).message).toBe(
        'Loss table programme rests on a catalogue that the run does not have.',
      ));

    it('that names an event outside its catalogue, or one twice', () => {
      expect(
        refused(withTable({ eventIndex: goodTable.eventIndex.map((event, r) => (r === 0 ? events : event)) }))
          .message,
      ).toMatch(/names an event outside its catalogue/);
      expect(
        refused(withTable({ eventIndex: goodTable.eventIndex.map((event, r) => (r === 0 ? -1 : event)) }))
          .message,
      ).toMatch(/names an event outside its catalogue/);
      expect(refused(withTable({ eventIndex: goodTable.eventIndex.map(() => 4) })).message).toBe(
        'Loss table programme names event event 4 twice.',
      );
    });

    it.each([0, -1, Infinity, not])('with an exchange rate of %p', (toContractCurrency) =>
      expectOutside(withTable({ toContractCurrency }), {
        parameter: 'The exchange rate of Loss table programme',
        value: toContractCurrency,
        bound: 'above 0',
      }),
    );

    it.each([-0.1, 1.1, not])('with a common share of %p', (share) => {
      const event = goodCatalogue.eventNames[goodTable.eventIndex[0] ?? 0] ?? '';
      expectOutside(withTable({ commonShare: firstRow(share, goodTable.commonShare) }), {
        parameter: `Loss table programme, event ${event}: the common share`,
        value: share,
        bound: 'from 0 to 1',
      });
    });

    it.each(['meanLoss', 'sd', 'commonShare', 'exposedValue'] as const)(
      'with a row too few in %s',
      (column) => {
        const rows = goodTable.eventIndex.length;
        const { outside } = refused(withTable({ [column]: goodTable[column].slice(1) }));
        expect(outside).toMatchObject({ value: rows - 1, bound: `its number of rows, ${rows}` });
      },
    );

    it('with moments that no law has', () => {
      expect(refused(withTable({ meanLoss: firstRow(-1, goodTable.meanLoss) })).outside?.parameter).toBe(
        'A mean loss',
      );
    });
  });
});

describe('moments of a loss that no law has', () => {
  it.each<[string, [number, number, number], OutsideDomain]>([
    ['a mean below 0', [-1, 0, not], { parameter: 'A mean loss', value: -1, bound: '0 or more' }],
    ['a mean that is no number', [not, 1, not], { parameter: 'A mean loss', value: not, bound: '0 or more' }],
    [
      'an infinite mean',
      [Infinity, 1, not],
      { parameter: 'A mean loss', value: Infinity, bound: '0 or more' },
    ],
    [
      'a deviation below 0',
      [1, -1, not],
      { parameter: 'The deviation of a loss', value: -1, bound: '0 or more' },
    ],
    [
      'a deviation that is no number',
      [1, not, not],
      { parameter: 'The deviation of a loss', value: not, bound: '0 or more' },
    ],
    [
      'a deviation of a loss with mean 0',
      [0, 1, not],
      { parameter: 'The deviation of a loss with mean 0', value: 1, bound: '0' },
    ],
    [
      'an infinite exposed value',
      [1, 1, Infinity],
      { parameter: 'An exposed value', value: Infinity, bound: 'finite' },
    ],
    [
      'a certain loss above the exposed value',
      [5, 0, 4],
      { parameter: 'A mean loss', value: 5, bound: 'at most the exposed value, 4' },
    ],
  ])('%s', (_name, [mean, sd, exposed], outside) =>
    expectOutside(() => severityOf(mean, sd, exposed), outside),
  );

  it.each([
    ['at the bound', 2, 4, 10],
    ['beyond it', 2, 6, 10],
    ['a mean of the exposed value', 10, 1, 10],
    ['a mean above it', 12, 1, 10],
    ['no exposed value at all', 1, 1, 0],
    ['an exposed value below 0', 1, 1, -5],
  ])('a deviation that no beta has, never clipped: %s', (_name, mean, sd, exposed) => {
    const refusal = refused(() => severityOf(mean, sd, exposed));
    expect(refusal.outside).toEqual({
      parameter: 'The squared deviation of a loss',
      value: sd * sd,
      bound: 'below mean × (exposed value − mean)',
    });
  });

  it('are none just within', () => expect(severityOf(2, 3.999, 10).kind).toBe('beta'));
});

describe('what is refused once the states are known', () => {
  it('a house that the book alone leaves at its floor in every state', () => {
    const ruined = { ...good, basis: { ...good.basis, capital: 0.5, attritionalAndOutward: 100 } };
    expect(refused(() => value(ruined)).message).toMatch(
      /at or below its floor: look at its capital, its floor and its book/,
    );
    // Without risk aversion nothing hangs on the floor.
    expect(() => value({ ...ruined, basis: { ...ruined.basis, riskAversion: 0 } })).not.toThrow();
  });

  it('a programme of which no layer pays in any state', () => {
    const dry = {
      ...good,
      programme: { ...good.programme, layers: [inventedLayer('A', 1, 1e9), inventedLayer('B', 1, 1e10)] },
    };
    expect(refused(() => value(dry)).message).toMatch(
      /does any layer pay: every attachment is beyond what the loss tables can lose/,
    );
  });

  it('a stated discount that implies no riskless rate', () => {
    const stated = {
      ...good,
      basis: { ...good.basis, discounting: { mode: 'stated' as const, discountFactor: 1e-6 } },
    };
    expect(refused(() => value(stated)).message).toMatch(/implies no sensible riskless rate/);
  });

  it('a stated discount of which any riskless rate would be as true: logarithmic utility of an idle house', () => {
    const idle = {
      ...good,
      book: [],
      basis: {
        ...good.basis,
        riskAversion: 1,
        attritionalAndOutward: 0,
        discounting: { mode: 'stated' as const, discountFactor: 1 },
      },
    };
    expect(refused(() => value(idle)).message).toMatch(/implies no sensible riskless rate/);
  });

  it('a floor so low for its risk aversion that no number holds the worth of money there', () => {
    const book = [{ ...goodContract, layers: goodContract.layers.map((layer) => ({ ...layer, line: 1 })) }];
    for (const [riskAversion, floor] of [
      [30, 1e-6],
      [400, 0.25],
      [3, 1e-200],
    ] as const) {
      const basis = { ...good.basis, capital: 6, attritionalAndOutward: 0, riskAversion, floor };
      const refusal = refused(() => value({ ...good, book, basis }));
      // Only some years are at the floor: it must not be said of every one.
      expect(refusal.message).not.toMatch(/In every simulated year/);
    }
  });

  it('not a house that some years leave at a low floor, though they weigh more than all others to the last digit', () => {
    const book = [{ ...goodContract, layers: goodContract.layers.map((layer) => ({ ...layer, line: 1 })) }];
    const basis = { ...good.basis, capital: 6, attritionalAndOutward: 0, riskAversion: 12, floor: 0.01 };
    const { house, series } = value({ ...good, book, basis });
    const floored = series.capital.filter((k) => k <= 0.01).length;
    expect(floored).toBeGreaterThan(0);
    expect(floored).toBeLessThan(500);
    expect(house.floorShare).toBeGreaterThan(0.99);
  });
});
