import { createHash } from 'node:crypto';
import { course, openWorkspace, perform, prepare, priceAgain, value, type Found, type Valuation, type ValuationInputs } from '.';
import { inventedInputs, inventedLayer } from './testing/invented';

/** A hash of every byte of a valuation, by part, so that a difference says where it is. */
const bytes = (valuation: Valuation): Record<string, string> => {
  const { series, ...told } = valuation;
  const hash = (of: string | Float64Array): string => createHash('sha256').update(typeof of === 'string' ? of : new Uint8Array(of.buffer, of.byteOffset, of.byteLength)).digest('hex');
  return {
    ...Object.fromEntries(Object.entries(told).map(([part, figures]) => [part, hash(JSON.stringify(figures))])),
    series: [series.capital, ...series.paying.flatMap(({ payoff, reinstatement }) => [payoff, reinstatement])].map(hash).join(' '),
  };
};

const inputs = inventedInputs({ events: 2000, states: 40_000, contracts: 6, layers: 4 });
/** A house small enough for the book to hurt. */
const lean: ValuationInputs = { ...inputs, basis: { ...inputs.basis, capital: 25, attritionalAndOutward: 0 } };
const valuation = value(lean);

describe('a valuation', () => {
  it('has the same bytes in whatever order its tasks are done', () => {
    const workspace = openWorkspace(structuredClone(lean));
    const steps = course(workspace);
    let step = steps.next();
    while (step.done !== true) {
      const found: Found[] = [];
      const { tasks } = step.value;
      // From the last to the first, each answer through a copy as between threads.
      for (let t = tasks.length - 1; t >= 0; t -= 1) {
        const task = tasks[t];
        if (task !== undefined) found[t] = structuredClone(perform(workspace, task));
      }
      step = steps.next(found);
    }
    expect(bytes(step.value)).toEqual(bytes(valuation));
  });

  it('prices other layers on the same draws to the bytes of a run from the beginning', () => {
    const workspace = openWorkspace(lean);
    const steps = course(workspace);
    for (let step = steps.next(); step.done !== true; ) step = steps.next(step.value.tasks.map((task) => perform(workspace, task)));
    const layers = lean.programme.layers.slice(1).map((layer) => ({ ...layer, limit: layer.limit * 1.1, attachment: layer.attachment * 1.2 }));
    expect(bytes(priceAgain(workspace, layers))).toEqual(bytes(value({ ...lean, programme: { ...lean.programme, layers } })));
    expect(() => priceAgain(workspace, [inventedLayer('lower', 1, 0.5)])).toThrow(/at least what the run kept/);
  });

  it('splits every premium into steps that add up to it', () => {
    for (const { split } of valuation.layers) {
      const marginal =
        split.risklessLoss + split.leanLoad + split.lossAdjustment + split.fixedExpense + split.brokerageAndExpense + split.reinstatementValue;
      expect(Math.abs(marginal / split.marginalPremium - 1)).toBeLessThan(1e-12);
      const technical = split.marginalPremium + split.lineSizeLoad + split.margin + split.minimumTopUp;
      expect(Math.abs(technical / split.technicalPremium - 1)).toBeLessThan(1e-12);
    }
  });

  it('loads remote layers more than working ones where the book suffers from the same events', () => {
    const { tables, layers } = lean.programme;
    const book = [{ tables, toHouseCurrency: 1, layers: layers.map((layer) => ({ ...layer, line: 0.4, premium: 0.3 })) }];
    const loads = value({ ...lean, book }).layers.map(({ split }) => split.leanLoad / split.risklessLoss);
    expect([...loads].sort((a, b) => a - b)).toEqual(loads);
    expect(loads[3]).toBeGreaterThan(2 * (loads[0] ?? 0));
  });

  it('prices the programme so that its parts add up, above the sum of stand-alone walk-aways', () => {
    const standAlone = valuation.layers.reduce((sum, layer) => sum + 0.1 * layer.walkAwayPremium.value, 0);
    const parts = valuation.layers.reduce((sum, layer) => sum + 0.1 * layer.programmeWalkAwayPart, 0);
    expect(Math.abs(parts / valuation.programme.walkAwayPremium.value - 1)).toBeLessThan(1e-12);
    expect(parts).toBeGreaterThan(standAlone);
  });

  it('asks more for a larger line, and the marginal premium for a vanishing one', () => {
    const basis = { ...lean.basis, fixedExpensePerContract: 0 };
    const at = (line: number) =>
      value({ ...lean, basis, programme: { ...lean.programme, layers: [inventedLayer('only', 6, 8, { line })] } }).layers[0]?.walkAwayPremium.value ?? 0;
    const small = value({ ...lean, basis, programme: { ...lean.programme, layers: [inventedLayer('only', 6, 8, { line: 1e-7 })] } }).layers[0];
    expect(Math.abs((small?.walkAwayPremium.value ?? 0) / (small?.marginalPremium.value ?? 1) - 1)).toBeLessThan(1e-6);
    expect(at(0.3)).toBeGreaterThan(at(0.1));
    expect(at(0.1)).toBeGreaterThan(small?.walkAwayPremium.value ?? 0);
  });

  it('agrees with the exact means before annual terms', () => {
    expect(valuation.selfCheck.flagged).toBe(false);
    expect(valuation.layers.map((layer) => layer.selfCheckErrors)).not.toContain(null);
    expect(Math.abs(valuation.selfCheck.groundUp ?? 9)).toBeLessThan(4);
  });

  it('anchors a sure unit, and finds the riskless rate that a stated discount implies', () => {
    expect(valuation.house.sureValue).toBeCloseTo(1 / 1.03, 12);
    const stated = value({ ...lean, basis: { ...lean.basis, discounting: { mode: 'stated', discountFactor: 0.9 } } });
    expect(1 / stated.house.sureValue - 1).toBeCloseTo(stated.house.risklessRate, 10);
  });

  it('draws a lens whose areas are the price and the expected loss', () => {
    valuation.layers.forEach((layer, l) => {
      const limit = lean.programme.layers[l]?.limit ?? 1;
      const area = (of: 'product' | 'plain'): number =>
        valuation.lens.reduce((sum, bin, b) => sum + (bin[of][l] ?? 0) * (b === 0 ? Math.log(10) / 12 : Math.log(bin.shareTo / bin.shareFrom)), 0);
      expect(area('plain')).toBeCloseTo(layer.expectedLoss.value / limit, 10);
      expect(area('product')).toBeCloseTo((layer.split.risklessLoss + layer.split.leanLoad) / valuation.house.sureValue / limit, 10);
    });
  });

  it('is not moved by leaving a layer that nothing reaches', () => {
    const basis = { ...lean.basis, fixedExpensePerContract: 0 };
    const before = value({ ...lean, basis });
    const dry = value({ ...lean, basis, programme: { ...lean.programme, layers: [...lean.programme.layers, inventedLayer('dry', 10, 1e9)] } });
    expect(dry.layers[4]).toMatchObject({ multiple: null, effectiveStates: 0, technicalRateOnLine: 0.01 });
    expect(dry.layers[0]?.walkAwayPremium).toEqual(before.layers[0]?.walkAwayPremium);
    expect(JSON.stringify(dry)).not.toContain('NaN');
  });

  it.each([
    [{ ...lean, basis: { ...lean.basis, capital: 0 } }, /capital of the house is 0; it must be above 0/],
    [{ ...lean, grid: { ...lean.grid, states: 10 } }, /from 1,000 to 10,000,000/],
    [{ ...lean, catalogues: [] }, /rests on a catalogue/],
    [{ ...lean, programme: { ...lean.programme, layers: [inventedLayer('x', 0, 1)] } }, /Layer x: the limit is 0; it must be above 0/],
  ])('refuses what cannot be priced, in words', (bad, words) => expect(() => prepare(bad)).toThrow(words));
});
