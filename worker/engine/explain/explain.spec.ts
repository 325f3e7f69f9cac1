import { course, openWorkspace, perform, type LayerTerms, type ValuationInputs, type Workspace } from '..';
import { EngineInputError } from '../model/refusal';
import { inventedInputs, inventedLayer } from '../testing/invented';
import { explainYear } from './explain';

const LAYERS: readonly LayerTerms[] = [
  inventedLayer('excess', 3, 1, { reinstatements: [1, 0.5] }),
  inventedLayer('timed', 3, 1, { reinstatements: [1], reinstatedProRataTime: true, annualDeductible: 0.5 }),
  inventedLayer('aggregate', 6, 4, { reinstatements: [], form: { kind: 'aggregate', threshold: 0.5, counts: 'over it', cap: 5 } }),
  inventedLayer('second event', 3, 1, { form: { kind: 'nth event', first: 2, qualifying: 1.5 } }),
  inventedLayer('inured', 3, 1, { quotaShareKept: 0.8, inuringCovers: [{ limit: 2, attachment: 2, annualLimit: 3 }], perils: ['wind'] }),
];

function valued(inputs: ValuationInputs): Workspace {
  const workspace = openWorkspace(inputs);
  const steps = course(workspace);
  for (let step = steps.next(); step.done !== true; ) step = steps.next(step.value.tasks.map((task) => perform(workspace, task)));
  return workspace;
}

describe('the explanation of a year', () => {
  const invented = inventedInputs({ events: 300, states: 3000, contracts: 2, layers: 1 });
  const workspace = valued({ ...invented, basis: { ...invented.basis, capital: 40, attritionalAndOutward: 0 }, programme: { ...invented.programme, layers: LAYERS } });

  it.each(LAYERS.map(({ key }, l) => [key, l] as const))('adds up to the price over all years: %s', (_key, l) => {
    const years = Array.from({ length: 3000 }, (_unused, state) => explainYear(workspace.explicable, l, state));
    const part = workspace.layers[l];
    const total = years.reduce((sum, year) => sum + year.contribution, 0);
    expect(total).toBeGreaterThan(0);
    expect(Math.abs(total / (part?.marginal.payoffValue ?? 0) - 1)).toBeLessThan(1e-12);
    for (const year of years) {
      const place = part?.paying.state.indexOf(year.state) ?? -1;
      // To the last bit what the kernel found, and the steps add up to it.
      expect(year.payoff).toBe(place < 0 ? 0 : part?.paying.payoff[place]);
      if (place >= 0) expect(year.reinstatement).toBe(part?.paying.reinstatement[place]);
      expect(year.occurrences.reduce((sum, { paid }) => sum + paid, 0)).toBeCloseTo(year.payoff, 12);
      expect(year.occurrences.reduce((sum, { counted }) => sum + counted, 0)).toBeCloseTo(year.counted, 12);
    }
  });

  it('is told of years that stand for a tenth of the price each, leanest first', () => {
    for (const { tellingYears } of workspace.layers) {
      expect(tellingYears.length).toBeGreaterThan(5);
      const bins = tellingYears.map(({ state }) => workspace.memory.columns.lensBin[state] ?? 0);
      expect([...bins].sort((a, b) => a - b)).toEqual(bins);
      expect(tellingYears.every(({ payoff, occurrences }) => payoff > 0 && occurrences.length > 0)).toBe(true);
    }
  });

  it.each([
    [9, 0],
    [0, 3000],
    [0, -1],
    [0, 1.5],
  ])('refuses layer %p, state %p', (layer, state) => expect(() => explainYear(workspace.explicable, layer, state)).toThrow(EngineInputError));
});
