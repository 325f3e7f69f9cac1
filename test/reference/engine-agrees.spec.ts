import type { Catalogue, ValuationInputs } from '../../worker/engine';
import { inventedInputs, inventedLayer, inventedTable } from '../../worker/engine/testing/invented';
import { comparison, disagreements } from './agreement';
import { valuedByEngine } from './engine';
import { priceByScipy, scipyRequestOf } from './scipy';

jest.setTimeout(120_000);

const STATES = 300_000;

/** A house that its book can hurt, and layers with every annual term. */
function scenario(): ValuationInputs {
  const invented = inventedInputs({ events: 1500, states: STATES, contracts: 5, layers: 3 });
  const [catalogue] = invented.catalogues as [Catalogue];
  const [priced] = invented.programme.tables;
  if (priced === undefined) throw new Error('the invented programme has a loss table');
  return {
    ...invented,
    basis: { ...invented.basis, capital: 60, attritionalAndOutward: 0.5, taxes: 0.02 },
    programme: {
      tables: [priced, { ...inventedTable(catalogue, 'second', 30, 0.3, 8), toContractCurrency: 0.8 }],
      toHouseCurrency: 1.25,
      inceptionDay: 91,
      layers: [
        inventedLayer('working', 3, 1, { reinstatements: [1, 1, 0.5], brokerage: 0.12 }),
        inventedLayer('middle', 6, 5, { annualDeductible: 1.5, line: 0.2 }),
        inventedLayer('remote', 15, 15, { reinstatements: [], line: 0.3 }),
        inventedLayer('limited', 6, 5, { reinstatements: [1], annualLimit: 8 }),
      ],
    },
    // The cedant's own table is in the book as well, so that the house already holds what is offered to it.
    book: [
      ...invented.book,
      {
        tables: [priced],
        toHouseCurrency: 1,
        layers: [{ ...inventedLayer('held', 10, 4, { line: 0.25 }), premium: 0.8 }],
      },
    ],
  };
}

const grouped = (inputs: ValuationInputs): ValuationInputs => ({
  ...inputs,
  catalogues: inputs.catalogues.map((catalogue) => ({
    ...catalogue,
    groups: [{ name: 'gales', varianceToMean: 2.2 }],
    groupIndex: Int32Array.from(catalogue.eventNames, (_name, i) => (i % 3 === 0 ? 0 : -1)),
  })),
});

describe('the engine and an independent valuation by SciPy', () => {
  const stated = { ...scenario().basis, discounting: { mode: 'stated', discountFactor: 0.96 } } as const;

  it.each<[string, ValuationInputs]>([
    ['anchored, Poisson counts', scenario()],
    ['stated discount, a group of events that vary together', { ...grouped(scenario()), basis: stated }],
  ])('agree within 4 standard errors: %s', async (_what, inputs) => {
    const { request, files } = scipyRequestOf(inputs);
    const theirs = await priceByScipy(request, files, { states: STATES });
    const ours = await valuedByEngine(inputs);
    expect(ours.selfCheck.flagged).toBe(false);
    expect(disagreements(comparison(ours, theirs))).toEqual([]);
    expect(Math.abs(ours.house.netPremium / theirs.house.netPremium - 1)).toBeLessThan(1e-12);
  });

  it('are told apart where one of them carries more loss adjustment expense', async () => {
    const inputs = scenario();
    const { request, files } = scipyRequestOf({
      ...inputs,
      basis: { ...inputs.basis, lossAdjustment: 0.12 },
    });
    const theirs = await priceByScipy(request, files, { states: STATES });
    const apart = disagreements(comparison(await valuedByEngine(inputs), theirs)).map(({ figure }) => figure);
    expect(apart).toEqual(
      expect.arrayContaining([
        'working: marginal premium',
        'working: walk-away premium',
        'programme walk-away',
      ]),
    );
    expect(apart).not.toContain('working: expected loss');
  });
});
