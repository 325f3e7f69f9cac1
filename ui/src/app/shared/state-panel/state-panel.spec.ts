import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component, resource, type ResourceRef } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { ProblemError } from '../../core/problem';
import { StatePanel } from './state-panel';
import { StatePanelHarness } from './state-panel.harness';

@Component({
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [StatePanel],
  template:
    '<ly-state-panel title="No quotes yet" detail="Price a programme first." [of]="of" (again)="asked()"><a href="#">Go</a></ly-state-panel>',
})
class Page {
  static load: () => Promise<unknown> = () => Promise.resolve([]);
  readonly of: ResourceRef<unknown> = resource({ loader: () => Page.load() });
  readonly asked = jest.fn(() => this.of.reload());
}

async function open(load: () => Promise<unknown>) {
  Page.load = load;
  const fixture = TestBed.createComponent(Page);
  const panel = await TestbedHarnessEnvironment.loader(fixture).getHarness(StatePanelHarness);
  return { page: fixture.componentInstance, panel };
}

const failing =
  (status: number, errorId: string | null = null) =>
  () =>
    Promise.reject(new ProblemError(status, 'T', 'It broke.', [], [], errorId));

describe('what stands where content would', () => {
  it('says what to do next where there is nothing', async () => {
    const { panel } = await open(() => Promise.resolve([]));
    expect(await panel.kind()).toBe('empty');
    expect(await panel.words()).toContain('No quotes yet Price a programme first.');
  });

  it.each([
    [403, 'forbidden', 'not open to you'],
    [404, 'missing', 'nothing here'],
    [0, 'offline', 'No connection'],
    [500, 'failed', 'It broke. Error e-9'],
  ])('finds its own words for a status of %d', async (status, kind, words) => {
    const { panel } = await open(failing(status, status === 500 ? 'e-9' : null));
    expect(await panel.kind()).toBe(kind);
    expect(await panel.words()).toContain(words);
  });

  it('lets what failed be tried again', async () => {
    const { page, panel } = await open(failing(500));
    Page.load = () => Promise.resolve([]);
    await panel.tryAgain();
    expect(page.asked).toHaveBeenCalledTimes(1);
    expect(await panel.kind()).toBe('empty');
  });
});
