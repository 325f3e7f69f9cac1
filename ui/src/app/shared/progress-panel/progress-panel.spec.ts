import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { ProgressPanel } from './progress-panel';
import { ProgressPanelHarness } from './progress-panel.harness';

async function open(inputs: Record<string, unknown>) {
  const fixture = TestBed.createComponent(ProgressPanel);
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  const panel = await TestbedHarnessEnvironment.harnessForFixture(fixture, ProgressPanelHarness);
  return { fixture, panel };
}

describe('long work', () => {
  beforeEach(() => jest.spyOn(Date, 'now').mockReturnValue(Date.parse('2027-01-01T00:01:00Z')));
  afterEach(() => jest.restoreAllMocks());

  it('says what, how far and about how long', async () => {
    const { panel } = await open({
      doing: 'Simulating years',
      done: 25,
      total: 100,
      startedAt: '2027-01-01T00:00:00Z',
    });
    expect(await panel.words()).toMatch(/Simulating years\s*25%\s*about 3 minutes more/);
  });

  it('promises nothing while it is too early to tell', async () => {
    const { panel } = await open({
      doing: 'Simulating years',
      done: 1,
      total: 100,
      startedAt: '2027-01-01T00:00:00Z',
    });
    expect(await panel.words()).not.toContain('about');
  });

  it('can be stopped, once', async () => {
    const { fixture, panel } = await open({ doing: 'Waiting', total: 0 });
    let cancels = 0;
    fixture.componentInstance.cancelled.subscribe(() => (cancels += 1));
    await panel.cancel();
    fixture.componentRef.setInput('cancelling', true);
    await panel.cancel();
    expect(cancels).toBe(1);
    expect(await panel.words()).toBe('Stopping');
  });
});
