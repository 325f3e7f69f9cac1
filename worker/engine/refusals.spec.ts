import { prepare, type HouseBasis, type LayerTerms, type ValuationInputs } from '.';
import type { OutsideDomain } from './model/refusal';
import { inventedInputs, inventedLayer } from './testing/invented';
import { outsideOf, refusalOf as refused } from './testing/refusal-of';

const good = inventedInputs({ events: 60, states: 1000, contracts: 1, layers: 1 });
const expectOutside = (act: () => unknown, outside: OutsideDomain): void =>
  expect(outsideOf(act)).toEqual(outside);

const withBasis = (over: Partial<HouseBasis>) => (): unknown =>
  prepare({ ...good, basis: { ...good.basis, ...over } });
const withLayer = (over: Partial<LayerTerms>) => (): unknown =>
  prepare({ ...good, programme: { ...good.programme, layers: [inventedLayer('A', 5, 10, over)] } });
const withGrid = (over: Partial<ValuationInputs['grid']>) => (): unknown =>
  prepare({ ...good, grid: { ...good.grid, ...over } });

/** NaN is outside every bound. */
const not = Number.NaN;

describe('what a run is refused for', () => {
  it('is nothing where all is in the domain', () => expect(() => prepare(good)).not.toThrow());

  describe('the house', () => {
    it.each<[string, keyof HouseBasis, number[], string]>([
      ['The capital of the house', 'capital', [0, -1, Infinity, not], 'above 0'],
      ['Risk aversion', 'riskAversion', [-1e-9, Infinity, not], '0 or more'],
      ['The floor', 'floor', [0, -0.1, 1.0000001, not], 'above 0 and 1 at most'],
      ['The return on assets', 'returnOnAssets', [-1, Infinity, not], 'above −1'],
      ['The target margin', 'targetMargin', [-0.01, Infinity, not], '0 or more'],
      ['The minimum rate on line', 'minimumRateOnLine', [-0.01, Infinity, not], '0 or more'],
      ['Taxes', 'taxes', [-0.01, 1.01, not], 'from 0 to 1'],
      ['Variable expense', 'variableExpense', [-0.01, 1.01, not], 'from 0 to 1'],
      ['Loss adjustment expense', 'lossAdjustment', [-0.01, Infinity, not], '0 or more'],
      ['The fixed expense of a contract', 'fixedExpensePerContract', [-1, Infinity, not], '0 or more'],
      ['Attritional loss and outward cost', 'attritionalAndOutward', [Infinity, -Infinity, not], 'finite'],
    ])('%s', (parameter, key, values, bound) =>
      values.forEach((x) => expectOutside(withBasis({ [key]: x }), { parameter, value: x, bound })),
    );

    it.each([-1, -2, Infinity, not])('the riskless rate %p', (risklessRate) =>
      expectOutside(withBasis({ discounting: { mode: 'anchored', risklessRate } }), {
        parameter: 'The riskless rate',
        value: risklessRate,
        bound: 'above −1',
      }),
    );

    it.each([0, -1, Infinity, not])('the discount factor %p', (discountFactor) =>
      expectOutside(withBasis({ discounting: { mode: 'stated', discountFactor } }), {
        parameter: 'The discount factor',
        value: discountFactor,
        bound: 'above 0',
      }),
    );

    it('brokerage, taxes and expenses that leave nothing of the premium, of a programme’s layer or the book’s', () => {
      const parameter = 'Layer A: brokerage, taxes and variable expense together';
      const act = (): unknown =>
        prepare({
          ...good,
          basis: { ...good.basis, taxes: 0.25, variableExpense: 0.25 },
          programme: { ...good.programme, layers: [inventedLayer('A', 5, 10, { brokerage: 0.5 })] },
        });
      expectOutside(act, { parameter, value: 1, bound: 'below 1' });
      const [contract] = good.book;
      if (contract === undefined) throw new Error('the invented inputs have a book');
      const book = [
        { ...contract, layers: [{ ...inventedLayer('B', 5, 10, { brokerage: 0.99 }), premium: 1 }] },
      ];
      expect(refused(() => prepare({ ...good, book })).outside?.parameter).toBe(parameter.replace('A', 'B'));
    });
  });

  describe('a layer', () => {
    it.each<[string, keyof LayerTerms, number[], string]>([
      ['the limit', 'limit', [0, -1, Infinity, not], 'above 0'],
      ['the attachment', 'attachment', [-1, Infinity, not], '0 or more'],
      ['the annual deductible', 'annualDeductible', [-1, Infinity, not], '0 or more'],
      ['the annual limit', 'annualLimit', [0, -1, not], 'above 0'],
      [
        'the share kept after the quota share',
        'quotaShareKept',
        [0, -0.1, 1.01, not],
        'above 0 and 1 at most',
      ],
      ['the co-participation', 'coParticipation', [-0.1, 1, not], '0 or more and below 1'],
      ['the line', 'line', [0, -0.1, 1.01, not], 'above 0 and 1 at most'],
      ['the brokerage', 'brokerage', [-0.1, 1, not], '0 or more and below 1'],
    ])('%s', (name, key, values, bound) =>
      values.forEach((x) =>
        expectOutside(withLayer({ [key]: x }), { parameter: `Layer A: ${name}`, value: x, bound }),
      ),
    );

    it.each([-0.1, Infinity, not])('the price of a reinstatement %p', (price) => {
      expectOutside(withLayer({ reinstatements: [1, price] }), {
        parameter: 'Layer A: the price of a reinstatement',
        value: price,
        bound: '0 or more',
      });
      expectOutside(withLayer({ reinstatements: [], unlimitedReinstatementsAt: price }), {
        parameter: 'Layer A: the price of unlimited reinstatements',
        value: price,
        bound: '0 or more',
      });
    });

    it('reinstatements beside unlimited ones', () =>
      expectOutside(withLayer({ reinstatements: [1, 1], unlimitedReinstatementsAt: 0 }), {
        parameter: 'Layer A: the number of reinstatements beside unlimited ones',
        value: 2,
        bound: '0',
      }));

    it('a line above what the co-participation leaves', () =>
      expectOutside(withLayer({ coParticipation: 0.25, line: 0.8 }), {
        parameter: 'Layer A: the line',
        value: 0.8,
        bound: 'above 0 and 0.75 at most',
      }));

    it.each([0, -1, 1.5, Infinity, not])('an n-th event with n = %p', (first) =>
      expectOutside(withLayer({ form: { kind: 'nth event', first, qualifying: 1 } }), {
        parameter: 'Layer A: the first event that counts',
        value: first,
        bound: 'a whole number from 1',
      }),
    );

    it.each([-1, Infinity, not])('a qualifying threshold of %p', (qualifying) =>
      expectOutside(withLayer({ form: { kind: 'nth event', first: 1, qualifying } }), {
        parameter: 'Layer A: the qualifying threshold',
        value: qualifying,
        bound: '0 or more',
      }),
    );

    const aggregate = (threshold: number, cap: number | null, over: Partial<LayerTerms> = {}) =>
      withLayer({
        form: { kind: 'aggregate', threshold, counts: 'in full', cap },
        reinstatements: [],
        ...over,
      });

    it.each([-1, Infinity, not])('an aggregate excess with threshold %p', (threshold) =>
      expectOutside(aggregate(threshold, null), {
        parameter: 'Layer A: the threshold of an occurrence',
        value: threshold,
        bound: '0 or more',
      }),
    );

    it.each([2, 1, -1, not])('an aggregate excess with threshold 2 and cap %p', (cap) =>
      expectOutside(aggregate(2, cap), {
        parameter: 'Layer A: the cap of an occurrence',
        value: cap,
        bound: 'above its threshold, 2',
      }),
    );

    it('an aggregate excess with reinstatements, limited or not', () => {
      const parameter = 'Layer A: the number of reinstatements of an aggregate excess';
      expectOutside(aggregate(2, null, { reinstatements: [1] }), { parameter, value: 1, bound: '0' });
      expect(refused(aggregate(2, null, { unlimitedReinstatementsAt: 0 })).outside?.parameter).toBe(
        parameter,
      );
    });

    it.each<[string, object, number, string]>([
      ['the limit of an inuring cover', { limit: 0 }, 0, 'above 0'],
      ['the limit of an inuring cover', { limit: Infinity }, Infinity, 'above 0'],
      ['the attachment of an inuring cover', { attachment: -1 }, -1, '0 or more'],
      ['the attachment of an inuring cover', { attachment: not }, not, '0 or more'],
      ['the annual limit of an inuring cover', { annualLimit: 0 }, 0, 'above 0'],
      ['the annual limit of an inuring cover', { annualLimit: not }, not, 'above 0'],
    ])('%s: %p', (name, over, x, bound) =>
      expectOutside(
        withLayer({ inuringCovers: [{ limit: 1, attachment: 1, annualLimit: Infinity, ...over }] }),
        { parameter: `Layer A: ${name}`, value: x, bound },
      ),
    );
  });

  describe('the grid, the programme and the book', () => {
    it.each(['', '0123', '00112233445566FF', '00112233445566fg', '00112233445566ff0'])('seed %p', (seed) =>
      expectOutside(withGrid({ seed }), {
        parameter: 'The seed',
        value: seed,
        bound: 'sixteen hexadecimal digits',
      }),
    );

    it.each([999, 0, 1000.5, 10_000_001, Infinity, not])('%p states', (states) =>
      expectOutside(withGrid({ states }), {
        parameter: 'The number of states',
        value: states,
        bound: 'a whole number from 1,000 to 10,000,000',
      }),
    );

    it.each([0, 367, not])('inception on day %p', (inceptionDay) =>
      expectOutside(() => prepare({ ...good, programme: { ...good.programme, inceptionDay } }), {
        parameter: 'The day of inception',
        value: inceptionDay,
        bound: 'from 1 to 366',
      }),
    );

    it('no layers, in the programme or in a contract of the book', () => {
      const outside = { parameter: 'The number of layers of a contract', value: 0, bound: 'above 0' };
      expectOutside(() => prepare({ ...good, programme: { ...good.programme, layers: [] } }), outside);
      expectOutside(
        () => prepare({ ...good, book: [{ tables: [], layers: [], toHouseCurrency: 1 }] }),
        outside,
      );
    });

    it.each([0, -1, Infinity, not])('an exchange rate of %p to the house', (toHouseCurrency) =>
      expectOutside(() => prepare({ ...good, programme: { ...good.programme, toHouseCurrency } }), {
        parameter: 'The exchange rate of a contract',
        value: toHouseCurrency,
        bound: 'above 0',
      }),
    );

    it('a premium of the book that is no number', () => {
      const [contract] = good.book;
      if (contract === undefined) throw new Error('the invented inputs have a book');
      for (const premium of [not, Infinity, -1]) {
        const book = [{ ...contract, layers: contract.layers.map((layer) => ({ ...layer, premium })) }];
        expect(refused(() => prepare({ ...good, book })).outside?.value).toBe(premium);
      }
    });
  });
});
