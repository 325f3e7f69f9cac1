import fc from 'fast-check';
import {
  course,
  EngineInputError,
  openWorkspace,
  perform,
  value,
  type Catalogue,
  type HouseBasis,
  type LayerForm,
  type LayerTerms,
  type LossTable,
  type Valuation,
  type ValuationInputs,
  type Workspace,
} from '.';
import { hungerOf, priceOf, pricedStates } from './house/state-prices';
import { marginalUtility, utilityGain } from './house/utility';
import { capitalEffect } from './premiums/deal';
import { dealAt } from './run/layer-task';
import {
  INVENTED_BASIS,
  inventedCatalogue,
  inventedInputs,
  inventedLayer,
  inventedTable,
} from './testing/invented';

/** Shrinking a valuation takes minutes and its seed says enough: the first failure is printed as it is. */
const runs = (numRuns: number, seed: number): fc.Parameters<unknown> => ({
  numRuns,
  seed,
  endOnFailure: true,
});
const between = (min: number, max: number): fc.Arbitrary<number> => fc.double({ min, max, noNaN: true });
/** Even in the logarithm. */
const orders = (min: number, max: number): fc.Arbitrary<number> =>
  between(Math.log(min), Math.log(max)).map((x) => Math.exp(x));
const oneOf = <A>(...items: readonly A[]): fc.Arbitrary<A> => fc.constantFrom(...items);

/** Two figures as one of a relative distance, so that both are printed where they differ. */
function expectClose(found: number, expected: number, relative: number): void {
  const close = Math.abs(found - expected) <= relative * Math.max(Math.abs(found), Math.abs(expected));
  expect({ found, expected, close }).toEqual({ found, expected, close: true });
}

function expectAtLeast(more: number, less: number, relative = 1e-12): void {
  const holds = more >= less - relative * Math.abs(less);
  expect({ more, less, holds }).toEqual({ more, less, holds: true });
}

/** A house that its book hurts, and a programme of the same events; the layer added last pays, whatever the others do. */
function small(
  layers: readonly LayerTerms[],
  basis: Partial<HouseBasis> = {},
  states = 1500,
): ValuationInputs {
  const invented = inventedInputs({ events: 80, states, contracts: 2, layers: 1 });
  return {
    ...invented,
    programme: { ...invented.programme, layers: [...layers, inventedLayer('pays', 1, 0)] },
    basis: { ...invented.basis, capital: 60, attritionalAndOutward: 0, fixedExpensePerContract: 0, ...basis },
  };
}

function valued(inputs: ValuationInputs): { workspace: Workspace; valuation: Valuation } {
  const workspace = openWorkspace(inputs);
  const steps = course(workspace);
  let step = steps.next();
  while (step.done !== true) step = steps.next(step.value.tasks.map((task) => perform(workspace, task)));
  return { workspace, valuation: step.value };
}

/** How far, as a share of the premiums, they are from leaving the house as well off as without the layers: by the states one by one. */
function offBy(workspace: Workspace, layers: readonly number[], premiums: readonly number[]): number {
  const { house } = workspace;
  const { states, preferences } = house;
  const change = new Float64Array(states);
  const rate = new Float64Array(states);
  layers.forEach((l, i) => {
    const part = workspace.layers[l];
    if (part === undefined) throw new Error('the layer was not valued');
    const effect = capitalEffect(dealAt(workspace, l, part.paying), house.sureValue);
    const premium = premiums[i] ?? 0;
    for (let s = 0; s < states; s += 1) {
      change[s] = (change[s] ?? 0) + effect.ofPremium * premium + effect.fixed;
      rate[s] = (rate[s] ?? 0) + effect.ofPremium * premium;
    }
    part.paying.state.forEach((s, p) => {
      const back = effect.ofReinstatement * premium * (part.paying.reinstatement[p] ?? 0);
      change[s] = (change[s] ?? 0) + effect.ofPayoff * (part.paying.payoff[p] ?? 0) + back;
      rate[s] = (rate[s] ?? 0) + back;
    });
  });
  let [gain, slope] = [0, 0];
  for (let s = 0; s < states; s += 1) {
    const k = house.capital[s] ?? 0;
    gain += utilityGain(k, change[s] ?? 0, preferences);
    slope += (rate[s] ?? 0) * marginalUtility(k + (change[s] ?? 0), preferences);
  }
  return slope === 0 ? gain : gain / slope;
}

const free = { reinstatements: [], unlimitedReinstatementsAt: 0 } as const;
const annual: fc.Arbitrary<Partial<LayerTerms>> = oneOf<Partial<LayerTerms>>(
  { reinstatements: [] },
  { reinstatements: [0] },
  { ...free },
  { reinstatements: [0, 0], annualDeductible: 1.5 },
  { reinstatements: [], annualLimit: 3, annualDeductible: 0.5 },
);

describe('the price of a layer', () => {
  it('rises with its limit', () => {
    fc.assert(
      fc.property(
        between(0.5, 8),
        between(0.2, 8),
        between(0.1, 8),
        fc.oneof(annual, oneOf<Partial<LayerTerms>>({ reinstatements: [1, 0.5] })),
        between(0, 8),
        (attachment, limit, more, terms, riskAversion) => {
          const layers = [limit, limit + more].map((l, i) =>
            inventedLayer(`limit-${i}`, l, attachment, terms),
          );
          const [narrow, wide] = value(small(layers, { riskAversion, minimumRateOnLine: 0 })).layers;
          for (const of of [
            (l: typeof narrow) => l?.marginalPremium.value,
            (l: typeof narrow) => l?.walkAwayPremium.value,
            (l: typeof narrow) => l?.technicalPremium,
            (l: typeof narrow) => l?.expectedLoss.value,
          ]) {
            expectAtLeast(of(wide) ?? Number.NaN, of(narrow) ?? Number.NaN, 1e-9);
          }
        },
      ),
      runs(12, 101),
    );
  });

  it('falls with its attachment, and with a deductible', () => {
    fc.assert(
      fc.property(
        between(0.2, 8),
        between(0.1, 8),
        between(0.2, 6),
        annual,
        between(0, 8),
        (attachment, higher, limit, terms, riskAversion) => {
          const layers = [
            inventedLayer('low', limit, attachment, terms),
            inventedLayer('high', limit, attachment + higher, terms),
            inventedLayer('deducted', limit, attachment, {
              ...terms,
              annualDeductible: (terms.annualDeductible ?? 0) + higher,
            }),
          ];
          const [low, high, deducted] = value(small(layers, { riskAversion, minimumRateOnLine: 0 })).layers;
          for (const less of [high, deducted]) {
            expectAtLeast(low?.marginalPremium.value ?? 0, less?.marginalPremium.value ?? Infinity, 1e-9);
            expectAtLeast(low?.walkAwayPremium.value ?? 0, less?.walkAwayPremium.value ?? Infinity, 1e-9);
          }
        },
      ),
      runs(12, 102),
    );
  });

  it('of two adjoining layers with unlimited free reinstatements is that of the joint one, state by state', () => {
    fc.assert(
      fc.property(
        between(0, 6),
        orders(0.01, 10),
        orders(0.01, 10),
        oneOf(1, 0.4),
        between(0, 12),
        (attachment, first, second, quotaShareKept, riskAversion) => {
          const terms = { ...free, quotaShareKept };
          const layers = [
            inventedLayer('lower', first, attachment, terms),
            inventedLayer('upper', second, attachment + first, terms),
            inventedLayer('joint', first + second, attachment, terms),
          ];
          const { series, layers: found } = value(small(layers, { riskAversion }));
          const [lower, upper, joint] = series.payoffs;
          joint?.forEach((z, s) => expectClose((lower?.[s] ?? 0) + (upper?.[s] ?? 0), z, 1e-9));
          const [a, b, c] = found.map((layer) => layer.marginalPremium.value);
          expectClose((a ?? 0) + (b ?? 0), c ?? 0, 1e-9);
        },
      ),
      runs(10, 103),
    );
  });

  it('splits exactly into steps that add up', () => {
    fc.assert(
      fc.property(extremes(), (extreme) => {
        const found = unlessRefused(inputsOf(extreme));
        for (const { split } of found?.valuation.layers ?? []) {
          const steps = [
            split.risklessLoss,
            split.leanLoad,
            split.lossAdjustment,
            split.fixedExpense,
            split.brokerageAndExpense,
            split.reinstatementValue,
          ];
          const largest = Math.max(...steps.map(Math.abs));
          const off =
            Math.abs(steps.reduce((x, y) => x + y, 0) - split.marginalPremium) / Math.max(largest, 1e-300);
          expect({ steps, off, fine: off < 1e-12 }).toEqual({ steps, off, fine: true });
          const technical = split.marginalPremium + split.lineSizeLoad + split.margin + split.minimumTopUp;
          expectClose(technical, split.technicalPremium, 1e-12);
        }
      }),
      runs(25, 104),
    );
  });
});

describe('the walk-away premium', () => {
  it('without fixed expense is the marginal premium at least, rises with the line, and tends to the marginal one', () => {
    fc.assert(
      fc.property(
        between(0.5, 6),
        between(0.5, 6),
        oneOf<Partial<LayerTerms>>(
          { reinstatements: [1] },
          { reinstatements: [] },
          { reinstatements: [1, 1], reinstatedProRataTime: true },
        ),
        between(0, 15),
        (attachment, limit, terms, riskAversion) => {
          const lines = [1e-9, 1e-6, 0.02, 0.3, 1];
          const layers = lines.map((line) =>
            inventedLayer(`line-${line}`, limit, attachment, { ...terms, line }),
          );
          const found = value(small(layers, { riskAversion })).layers.slice(0, lines.length);
          found.forEach((layer, i) => {
            expectAtLeast(layer.walkAwayPremium.value, layer.marginalPremium.value, 1e-10);
            if (i > 0)
              expectAtLeast(
                layer.walkAwayPremium.value,
                found[i - 1]?.walkAwayPremium.value ?? Infinity,
                1e-9,
              );
          });
          // Of a line so small, what is above the marginal premium is of the order of the line.
          expectClose(found[0]?.walkAwayPremium.value ?? 0, found[0]?.marginalPremium.value ?? 1, 1e-7);
          expectClose(found[1]?.walkAwayPremium.value ?? 0, found[1]?.marginalPremium.value ?? 1, 1e-4);
        },
      ),
      runs(12, 105),
    );
  });

  it('and the programme’s leave the house exactly as well off as without, summed state by state', () => {
    fc.assert(
      fc.property(extremes(), (extreme) => {
        const found = unlessRefused(inputsOf(extreme));
        if (found === null) return;
        const { workspace, valuation } = found;
        const { layers, programme } = valuation;
        const each = layers.map((layer, l) => offBy(workspace, [l], [layer.walkAwayPremium.value]));
        const together = offBy(
          workspace,
          [...layers.keys()],
          layers.map((layer) => layer.programmeWalkAwayPart),
        );
        const fine = [...each, together].every((off) => Math.abs(off) < 1e-8);
        expect({ each, together, fine }).toEqual({ each, together, fine: true });
        const parts = layers.reduce(
          (sum, layer, l) => sum + (extreme.layers[l]?.line ?? 0) * layer.programmeWalkAwayPart,
          0,
        );
        expectClose(parts, programme.walkAwayPremium.value, 1e-9);
      }),
      runs(60, 106),
    );
  });
});

describe('risk aversion', () => {
  const terms = fc.record({
    attachment: between(0, 5),
    limit: orders(0.1, 20),
    over: oneOf<Partial<LayerTerms>>(
      { reinstatements: [1] },
      { ...free, unlimitedReinstatementsAt: 0.5 },
      { reinstatements: [1, 2], reinstatedProRataTime: true, brokerageOnReinstatements: true },
    ),
    line: oneOf(1e-6, 0.2, 1),
    fixed: oneOf(0, 0.3),
  });

  it('of 0 gives the discounted expected loss with its expenses, marginal and walk-away alike', () => {
    fc.assert(
      fc.property(terms, between(-0.02, 0.2), ({ attachment, limit, over, line, fixed }, risklessRate) => {
        const layer = inventedLayer('only', limit, attachment, { ...over, line });
        const basis = {
          riskAversion: 0,
          fixedExpensePerContract: fixed,
          discounting: { mode: 'anchored' as const, risklessRate },
        };
        const [found] = value(small([layer], basis)).layers;
        const { taxes, variableExpense, lossAdjustment } = INVENTED_BASIS;
        const [z, rho] = [found?.expectedLoss.value ?? 0, found?.expectedReinstatement.value ?? 0];
        const today = 1 / (1 + risklessRate);
        const reinstated = 1 - taxes - (layer.brokerageOnReinstatements === true ? layer.brokerage : 0);
        const premium =
          (z * today * (1 + lossAdjustment) + fixed / 2 / line) /
          (1 - layer.brokerage - taxes - variableExpense + reinstated * rho * today);
        expectClose(found?.marginalPremium.value ?? 0, premium, 1e-12);
        expectClose(found?.walkAwayPremium.value ?? 0, premium, 1e-10);
        expectClose(found?.programmeWalkAwayPart ?? 0, premium, 1e-9);
        expect(Math.abs(found?.split.leanLoad ?? 1)).toBeLessThan(1e-12 * z + 1e-300);
      }),
      runs(15, 107),
    );
  });

  it('near 1 gives what 1, the logarithm, gives', () => {
    fc.assert(
      fc.property(
        terms,
        oneOf(1e-3, 1e-5, 1e-8, 1e-12, 2 ** -52),
        ({ attachment, limit, over, line, fixed }, distance) => {
          const layer = inventedLayer('only', limit, attachment, { ...over, line });
          const at = (riskAversion: number) =>
            value(small([layer], { riskAversion, fixedExpensePerContract: fixed, capital: 30 })).layers[0];
          const log = at(1);
          for (const found of [at(1 - distance), at(1 + distance)]) {
            // The price moves with risk aversion by a few times itself at most; the rest is the solvers' own error.
            expectClose(
              found?.marginalPremium.value ?? 0,
              log?.marginalPremium.value ?? 1,
              10 * distance + 1e-12,
            );
            expectClose(
              found?.walkAwayPremium.value ?? 0,
              log?.walkAwayPremium.value ?? 1,
              10 * distance + 1e-10,
            );
            expectClose(
              found?.programmeWalkAwayPart ?? 0,
              log?.programmeWalkAwayPart ?? 1,
              10 * distance + 1e-9,
            );
          }
        },
      ),
      runs(10, 108),
    );
  });
});

describe('states of unequal weight', () => {
  it('priced the same when one is split into two of the same capital and payoff', () => {
    const state = fc.record({ weight: orders(1e-6, 1), k: between(-0.5, 1.3), payoff: between(0, 10) });
    fc.assert(
      fc.property(
        fc.array(state, { minLength: 1, maxLength: 40 }),
        fc.nat(),
        between(0, 1),
        between(0, 15),
        (states, at, share, riskAversion) => {
          const total = states.reduce((sum, { weight }) => sum + weight, 0);
          const whole = states.map((one) => ({ ...one, weight: one.weight / total }));
          const place = at % whole.length;
          const split = whole.flatMap((one, i) =>
            i === place
              ? [
                  { ...one, weight: one.weight * share },
                  { ...one, weight: one.weight * (1 - share) },
                ]
              : [one],
          );
          const [before, after] = [whole, split].map((list) => {
            const priced = pricedStates(
              list.map(({ weight }) => weight),
              hungerOf(
                list.map(({ k }) => k),
                0.95,
                { riskAversion, floor: 0.25 },
              ),
            );
            return {
              priced,
              ...priceOf(
                priced,
                list.map(({ payoff }) => payoff),
              ),
            };
          });
          if (before === undefined || after === undefined) throw new Error('both were priced');
          expectClose(after.price, before.price, 1e-12);
          expectClose(after.risklessPart, before.risklessPart, 1e-12);
          expect(Math.abs(after.covariance - before.covariance)).toBeLessThanOrEqual(1e-12 * before.price);
          expectClose(after.priced.sureValue, before.priced.sureValue, 1e-12);
          expect(Math.abs(after.priced.largestSharpeRatio - before.priced.largestSharpeRatio)).toBeLessThan(
            1e-12 * (1 + before.priced.largestSharpeRatio),
          );
          const joined =
            (after.priced.pricedProbability[place] ?? 0) + (after.priced.pricedProbability[place + 1] ?? 0);
          expectClose(joined, before.priced.pricedProbability[place] ?? 0, 1e-12);
          expectClose(
            after.priced.pricedProbability.reduce((x, y) => x + y, 0),
            1,
            1e-12,
          );
        },
      ),
      runs(300, 109),
    );
  });
});

describe('whatever is in the domain', () => {
  it('gives numbers everywhere in the result, or is refused in words', () => {
    let priced = 0;
    fc.assert(
      fc.property(extremes(), (extreme) => {
        const found = unlessRefused(inputsOf(extreme));
        if (found === null) return;
        priced += 1;
        expect(notNumbers(found.valuation)).toEqual([]);
      }),
      runs(120, 110),
    );
    // Most must be priced, or nothing was tested.
    expect(priced).toBeGreaterThan(80);
  });

  it('gives numbers where a dry layer stands beside a paying one', () => {
    fc.assert(
      fc.property(
        orders(1, 1e12),
        oneOf(0, 0.02),
        between(0, 30),
        (limit, fixedExpensePerContract, riskAversion) => {
          const layers = [
            inventedLayer('dry', limit, 1e12),
            inventedLayer('paying', 3, 1),
            inventedLayer('dry too', limit, 1e9, { reinstatements: [] }),
          ];
          const found = value(small(layers, { fixedExpensePerContract, riskAversion, capital: 200 }));
          expect(notNumbers(found)).toEqual([]);
          expect(found.layers[0]).toMatchObject({
            multiple: null,
            impliedDeviationLoad: null,
            effectiveStates: 0,
            topEvents: [],
            tellingYears: [],
          });
          expect(found.layers[1]?.expectedLoss.value).toBeGreaterThan(0);
        },
      ),
      runs(8, 111),
    );
  });
});

/** Null where the inputs are refused in words; whatever else is thrown is thrown on. */
function unlessRefused(inputs: ValuationInputs): { workspace: Workspace; valuation: Valuation } | null {
  try {
    return valued(inputs);
  } catch (error) {
    if (!(error instanceof EngineInputError)) throw error;
    expect(error.message).toMatch(/^[A-Z].*[.]$/);
    expect(error.message).not.toMatch(/NaN|undefined|\[object/);
    return null;
  }
}

/** Where in a result there is NaN or an infinite number. */
function notNumbers(result: unknown, path = ''): string[] {
  if (typeof result === 'number')
    return result > -Infinity && result < Infinity ? [] : [`${path} is ${result}`];
  if (ArrayBuffer.isView(result))
    return [...(result as Float64Array)].some((x) => !(x > -Infinity && x < Infinity))
      ? [`${path} holds what is no number`]
      : [];
  if (typeof result !== 'object' || result === null) return [];
  return Object.entries(result).flatMap(([key, inner]) => notNumbers(inner, `${path}.${key}`));
}

/** Points from all over the domain: what inputs are made of, short enough to be printed. */
function extremes() {
  const severity = oneOf(
    'certain',
    'none',
    'lognormal',
    'skewed lognormal',
    'beta',
    'beta near its bound',
    'beta near certain',
  );
  const form: fc.Arbitrary<LayerForm> = fc.oneof(
    { weight: 3, arbitrary: fc.constant<LayerForm>({ kind: 'excess' }) },
    fc.record({
      kind: fc.constant('aggregate' as const),
      threshold: fc.oneof(fc.constant(0), orders(0.1, 10)),
      counts: oneOf('in full' as const, 'over it' as const),
      cap: oneOf(null, 11, 1e6),
    }),
    fc.record({
      kind: fc.constant('nth event' as const),
      first: oneOf(1, 2, 3),
      qualifying: fc.oneof(fc.constant(0), orders(0.1, 10)),
    }),
  );
  const layer = fc
    .record({
      form,
      limit: fc.oneof({ weight: 6, arbitrary: orders(0.1, 100) }, oneOf(1e-9, 1e12)),
      attachment: fc.oneof(fc.constant(0), { weight: 4, arbitrary: orders(0.1, 30) }, fc.constant(1e12)),
      annualDeductible: oneOf(0, 0, 0.7),
      reinstatements: oneOf([], [0], [1], [1, 0.5], [1.25, 1.5, 2]),
      unlimited: oneOf(null, null, 0, 1),
      reinstatedProRataTime: fc.boolean(),
      annualLimit: oneOf(Infinity, Infinity, 4, 1e-6),
      quotaShareKept: oneOf(1, 1, 0.5, 1e-3),
      inured: oneOf(false, false, true),
      line: oneOf(0.1, 0.3, 1, 1 - 1e-12, 1e-3, 1e-9),
      brokerage: oneOf(0, 0.1, 0.3),
      brokerageOnReinstatements: fc.boolean(),
    })
    .map(({ form: kind, unlimited, inured, reinstatements, limit, attachment, ...terms }): LayerTerms => {
      const summed = kind.kind === 'aggregate';
      return inventedLayer('extreme', limit, attachment, {
        ...terms,
        form: kind,
        reinstatements: summed || unlimited !== null ? [] : reinstatements,
        ...(!summed && unlimited !== null ? { unlimitedReinstatementsAt: unlimited } : {}),
        inuringCovers: inured ? [{ limit: 2, attachment: 1, annualLimit: 3 }] : [],
      });
    });
  const basis = fc.record({
    // The book loses up to a few hundred: from a house that it ruins in many states to one that never feels it.
    capital: fc.oneof({ weight: 3, arbitrary: orders(0.1, 300) }, orders(1e3, 1e12)),
    riskAversion: fc.oneof(oneOf(0, 0.5, 1, 1 + 1e-9, 2, 15, 30), between(0, 30)),
    discounting: fc.oneof(
      {
        weight: 4,
        arbitrary: fc.record({
          mode: fc.constant('anchored' as const),
          risklessRate: oneOf(0, 0.03, -0.02, 0.5),
        }),
      },
      fc.record({ mode: fc.constant('stated' as const), discountFactor: oneOf(0.95, 0.8, 1) }),
    ),
    returnOnAssets: oneOf(null, null, 0, 0.1, -0.3),
    floor: oneOf(0.25, 0.25, 0.999, 0.05, 1e-3, 1e-6),
    targetMargin: oneOf(0, 0.08),
    minimumRateOnLine: oneOf(0, 0.01),
    lossAdjustment: oneOf(0, 0.02),
    fixedExpensePerContract: oneOf(0, 0.02, 5),
    attritionalAndOutward: oneOf(0, 1, -3),
  });
  return fc.record({
    rate: orders(0.05, 2),
    varianceToMean: oneOf(null, null, 1.000001, 2, 40),
    severities: fc.array(severity, { minLength: 24, maxLength: 24 }),
    size: oneOf(1, 1, 1e-3),
    layers: fc.array(layer, { minLength: 1, maxLength: 3 }),
    tables: oneOf(1, 1, 2),
    toContractCurrency: oneOf(1, 1, 0.01, 120),
    inceptionDay: oneOf(1, 200, 366),
    toHouseCurrency: oneOf(1, 0.5),
    basis,
    hurts: fc.boolean(),
  });
}

type Extreme = ReturnType<typeof extremes> extends fc.Arbitrary<infer A> ? A : never;

function inputsOf({
  rate,
  varianceToMean,
  severities,
  size,
  layers,
  tables,
  toContractCurrency,
  inceptionDay,
  toHouseCurrency,
  basis,
  hurts,
}: Extreme): ValuationInputs {
  // Years that vary wildly are drawn from many more points than they keep.
  const invented = inventedCatalogue(72, varianceToMean !== null && varianceToMean > 10 ? rate / 10 : rate);
  const catalogue: Catalogue = {
    ...invented,
    groups: varianceToMean === null ? [] : [{ name: 'storms', varianceToMean }],
    groupIndex: Int32Array.from({ length: 72 }, (_unused, e) =>
      varianceToMean !== null && e % 3 > 0 ? 0 : -1,
    ),
  };
  const table = (lineage: string, seed: number): LossTable =>
    reshaped(inventedTable(catalogue, lineage, 80 * size, 0.9, seed), severities, toContractCurrency / size);
  const book = {
    tables: [inventedTable(catalogue, 'book', 80, 0.9, 5)],
    layers: [{ ...inventedLayer('book', 60, 1), line: 1, premium: 6 }],
    toHouseCurrency: 1,
  };
  return {
    grid: { seed: '00112233445566ff', states: 1000 },
    catalogues: [catalogue],
    programme: {
      tables: Array.from({ length: tables }, (_unused, t) => table(`programme-${t}`, 7 + t)),
      layers: layers.map((terms, l) => ({ ...terms, key: `extreme-${l}` })),
      inceptionDay,
      toHouseCurrency,
    },
    book: hurts ? [book] : [],
    basis: { ...INVENTED_BASIS, ...basis },
  };
}

/** A table with the given kinds of severity, in turn. */
function reshaped(table: LossTable, severities: readonly string[], toContractCurrency: number): LossTable {
  const kind = (r: number): string => severities[r % severities.length] ?? '';
  const meanLoss = table.meanLoss.map((m, r) => (kind(r) === 'none' ? 0 : m + 1e-9));
  const exposedValue = table.exposedValue.map((_x, r) =>
    kind(r).startsWith('beta')
      ? (meanLoss[r] ?? 0) * (r % 5 === 0 ? 1.001 : 20 + 1000 * (r % 3))
      : Number.NaN,
  );
  const most = (r: number): number =>
    Math.sqrt((meanLoss[r] ?? 0) * ((exposedValue[r] ?? 0) - (meanLoss[r] ?? 0)));
  const sd = meanLoss.map((m, r) => {
    switch (kind(r)) {
      case 'lognormal':
        return 0.7 * m;
      case 'skewed lognormal':
        return 300 * m;
      case 'beta':
        return 0.4 * most(r);
      case 'beta near its bound':
        return 0.9999 * most(r);
      case 'beta near certain':
        return 1e-3 * most(r);
      default:
        return 0;
    }
  });
  return { ...table, meanLoss, sd, exposedValue, toContractCurrency };
}
