import { makeDemo } from '../../fixtures/demo/make';
import type { DemoContract } from '../../fixtures/demo/scenario';
import { comparison, disagreements } from './agreement';
import { renewalInputs } from './demo-inputs';
import { valuedByEngine } from './engine';
import { priceByScipy, scipyRequestOf, type ScipyValuation } from './scipy';

jest.setTimeout(300_000);

/** Thirteen blocks, the last of them not whole. */
const STATES = 200_000;

const demo = makeDemo();
const renewal = (cedant: number, name: RegExp): DemoContract => {
  const found = demo.book.find(
    (contract) => contract.cedant === demo.cedants[cedant]?.name && name.test(contract.name),
  );
  if (found === undefined) throw new Error(`the demo's cedant ${cedant} has no contract like ${name.source}`);
  return found;
};

/** E[m·Z] over E[m]·E[Z] of each layer: how many times its expected loss a layer is worth, beyond the riskless rate. */
const multiples = ({ layers, house }: ScipyValuation): number[] =>
  layers.map(({ pricedLoss, expectedLoss }) => pricedLoss.value / house.sureValue / expectedLoss.value);

describe('the demo’s house on its book', () => {
  const renewed = renewal(0, /All natural perils/);
  const inputs = renewalInputs(demo, renewed, STATES);
  const { request, files } = scipyRequestOf(inputs);
  let theirs: ScipyValuation;
  beforeAll(async () => {
    theirs = await priceByScipy(request, files, { states: STATES });
  });

  it('would lose 18 to 22% of its capital in 1 of 250 years, by the whole book', async () => {
    const small = { ...request.programme, layers: request.programme.layers.slice(0, 1) };
    const expiring = scipyRequestOf({
      ...inputs,
      book: renewalInputs(demo, { ...renewed }, STATES).book,
    });
    const whole = await priceByScipy({ ...expiring.request, programme: small }, expiring.files, {
      states: STATES,
    });
    const share = whole.house.oneIn250.value / demo.basis.capital;
    expect(expiring.request.book).toHaveLength(demo.book.length);
    expect(share).toBeGreaterThan(0.18);
    expect(share).toBeLessThan(0.22);
    expect(whole.house.floorShare).toBeLessThan(0.02);
    expect(whole.house.effectiveStates).toBeGreaterThan(10_000);
  });

  it('asks two to three times its expected loss for a remote layer, and little more than its own for a working one', async () => {
    const tower = multiples(theirs);
    expect([...tower].sort((a, b) => a - b)).toEqual(tower);
    for (const remote of tower.slice(2)) {
      expect(remote).toBeGreaterThan(2);
      expect(remote).toBeLessThan(3);
    }
    expect(tower[0]).toBeLessThan(1.4);
    const rivers = scipyRequestOf(renewalInputs(demo, renewal(0, /Earthquake and flood/), STATES));
    const [working] = multiples(await priceByScipy(rivers.request, rivers.files, { states: STATES }));
    expect(working).toBeGreaterThan(1);
    expect(working).toBeLessThan(1.2);
  });

  it('is valued alike by the engine', async () => {
    const ours = await valuedByEngine(inputs);
    expect(ours.selfCheck.flagged).toBe(false);
    expect(disagreements(comparison(ours, theirs))).toEqual([]);
  });
});

describe('the demo’s book', () => {
  const layers = demo.book.flatMap((contract) => contract.layers);
  const premiumRates = layers.map(({ premium, limit }) => premium / limit);

  it('is one that a treaty person would know', () => {
    expect(demo.book.length).toBeGreaterThanOrEqual(25);
    expect(demo.book.length).toBeLessThanOrEqual(35);
    expect(demo.cedants).toHaveLength(12);
    expect(demo.brokerFirms).toHaveLength(3);
    for (const { layers: tower } of demo.book) {
      expect(tower.length).toBeGreaterThanOrEqual(3);
      expect(tower.length).toBeLessThanOrEqual(5);
      tower
        .slice(1)
        .forEach((layer, below) =>
          expect(layer.attachment).toBeCloseTo(
            (tower[below]?.attachment ?? 0) + (tower[below]?.limit ?? 0),
            0,
          ),
        );
      const rates = tower.map(({ premium, limit }) => premium / limit);
      expect([...rates].sort((a, b) => b - a)).toEqual(rates);
    }
    expect(Math.min(...premiumRates)).toBeGreaterThanOrEqual(0.0195);
    expect(Math.max(...premiumRates)).toBeLessThanOrEqual(0.2505);
    expect(layers.every(({ line, brokerage }) => line >= 0.025 && line <= 0.15 && brokerage === 0.1)).toBe(
      true,
    );
    expect(layers.filter(({ remainingLimit }) => remainingLimit !== null)).toHaveLength(1);
    const january = demo.book.filter(({ inceptionOn }) => inceptionOn.endsWith('-01-01'));
    expect(january.length).toBeGreaterThan(demo.book.length / 2);
    for (const { inceptionOn } of demo.book) expect(inceptionOn).toMatch(/^202[67]-(01|04|05|06|07)-01$/);
  });

  it('rests on three catalogues of 20,000 events in all, about two and a half occurrences a year', () => {
    const events = demo.catalogues.flatMap((catalogue) => catalogue.events);
    expect(demo.catalogues).toHaveLength(3);
    expect(events).toHaveLength(20_000);
    expect(events.reduce((sum, { ratePerYear }) => sum + ratePerYear, 0)).toBeCloseTo(2.5, 2);
    expect(new Set(demo.catalogues[0]?.events.map(({ peril }) => peril))).toEqual(
      new Set(['wind', 'storm flood']),
    );
    const names = new Set(events.map(({ event }) => event));
    for (const { rows } of demo.lossTables) {
      expect(rows.every(({ event }) => names.has(event))).toBe(true);
      expect(
        rows.every(({ meanLoss, sd, exposedValue }) => sd * sd < meanLoss * (exposedValue - meanLoss)),
      ).toBe(true);
    }
  });

  it('is the same every time', () => {
    const again = makeDemo();
    expect(JSON.stringify(again.book)).toBe(JSON.stringify(demo.book));
    expect(JSON.stringify(again.lossTables[7])).toBe(JSON.stringify(demo.lossTables[7]));
  });
});
