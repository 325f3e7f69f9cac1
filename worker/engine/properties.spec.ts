import fc from 'fast-check';
import { payoffInEveryState, value, type HouseBasis, type LayerTerms, type ValuationInputs } from '.';
import { hungerOf, priceOf, pricedStates } from './house/state-prices';
import { INVENTED_BASIS, inventedInputs, inventedLayer } from './testing/invented';

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
          const { series, states, layers: found } = value(small(layers, { riskAversion }));
          const [lower, upper, joint] = series.paying.map((paying) => payoffInEveryState(paying, states));
          joint?.forEach((z, s) => expectClose((lower?.[s] ?? 0) + (upper?.[s] ?? 0), z, 1e-9));
          const [a, b, c] = found.map((layer) => layer.marginalPremium.value);
          expectClose((a ?? 0) + (b ?? 0), c ?? 0, 1e-9);
        },
      ),
      runs(10, 103),
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
