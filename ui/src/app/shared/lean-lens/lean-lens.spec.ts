import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import type { LensBin } from '@leanyear/contract/runs';
import { LeanLens } from './lean-lens';
import { LeanLensHarness } from './lean-lens.harness';

// jsdom has no canvas and no layout: what is drawn is tested as an option, what it looks like in a browser.
jest.mock('../chart/echarts', () => ({
  init: () => ({ setOption: jest.fn(), resize: jest.fn(), dispose: jest.fn() }),
}));
globalThis.ResizeObserver = class {
  observe = jest.fn();
  unobserve = jest.fn();
  disconnect = jest.fn();
};
window.matchMedia = () => ({ matches: false, addEventListener: jest.fn() }) as unknown as MediaQueryList;

const LAYERS = ['First', 'Second', 'Third', 'Fourth'];
const BINS: readonly LensBin[] = [
  {
    shareFrom: 0,
    shareTo: 0.01,
    hunger: 6.5,
    meanCapital: 0.5,
    payoff: [1, 0.9, 0.8, 0.7],
    product: [0.1, 0.2, 0.3, 0.4],
    plain: [0.01, 0.02, 0.03, 0.04],
  },
  {
    shareFrom: 0.01,
    shareTo: 1,
    hunger: 0.9,
    meanCapital: 1.1,
    payoff: [0, 0, 0, 0],
    product: [0, 0, 0, 0],
    plain: [0, 0, 0, 0],
  },
];

async function open(): Promise<LeanLensHarness> {
  const fixture = TestBed.createComponent(LeanLens);
  fixture.componentRef.setInput('bins', BINS);
  fixture.componentRef.setInput('layers', LAYERS);
  return TestbedHarnessEnvironment.harnessForFixture(fixture, LeanLensHarness);
}

describe('the lean lens', () => {
  it('shows the first layers, lets others be chosen, and never none', async () => {
    const lens = await open();
    expect(await lens.shown()).toEqual(['First', 'Second', 'Third']);
    for (const layer of ['Fourth', 'First', 'Second', 'Third']) await lens.toggle(layer);
    expect(await lens.shown()).toEqual(['Fourth']);
    await lens.toggle('Fourth');
    expect(await lens.shown()).toEqual(['Fourth']);
  });

  it('says what it shows', async () => {
    expect(await (await open()).description()).toContain('6.50 times its average');
  });

  it('has its figures behind it', async () => {
    const rows = await (await open()).table();
    expect(rows[0]).toContain('6.50');
    expect(rows[0]).toContain('0.3000');
  });
});
