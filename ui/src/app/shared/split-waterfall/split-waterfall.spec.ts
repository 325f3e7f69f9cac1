import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { SplitWaterfall } from './split-waterfall';
import { SplitWaterfallHarness } from './split-waterfall.harness';
import { waterfallRows, type PremiumSplit } from './waterfall-rows';

const SPLIT: PremiumSplit = {
  risklessLoss: 40,
  leanLoad: 50,
  lossAdjustment: 1,
  fixedExpense: 2,
  brokerageAndExpense: 17,
  reinstatementValue: -10,
  marginalPremium: 100,
  lineSizeLoad: 8,
  walkAwayPremium: 108,
  margin: 12,
  minimumTopUp: 0,
  technicalPremium: 120,
};

describe('the premium taken apart', () => {
  it('begins each step where the one before ended, and totals at nothing', () => {
    const rows = Object.fromEntries(waterfallRows(SPLIT).map((row) => [row.key, row]));
    expect(rows['leanLoad']).toMatchObject({ from: 40 / 120, to: 90 / 120 });
    expect(rows['reinstatementValue']).toMatchObject({ from: 100 / 120, to: 110 / 120, amount: -10 });
    expect(rows['marginalPremium']).toMatchObject({ from: 0, to: 100 / 120 });
    expect(rows['margin']).toMatchObject({ from: 108 / 120, to: 1 });
  });

  it('stays within its width where parts are below nothing', () => {
    for (const row of waterfallRows({ ...SPLIT, leanLoad: -90 })) {
      expect(row.from).toBeGreaterThanOrEqual(0);
      expect(row.to).toBeLessThanOrEqual(1);
    }
  });

  it('leaves out what adds nothing', async () => {
    const fixture = TestBed.createComponent(SplitWaterfall);
    fixture.componentRef.setInput('split', SPLIT);
    const parts = await (
      await TestbedHarnessEnvironment.harnessForFixture(fixture, SplitWaterfallHarness)
    ).parts();
    expect(parts).toHaveLength(11);
    expect(parts).not.toContain('minimumTopUp');
  });
});
