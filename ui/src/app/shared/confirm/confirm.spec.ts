import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { Confirm } from './confirm';
import { ConfirmHarness } from './confirm.harness';

@Component({ changeDetection: ChangeDetectionStrategy.OnPush, template: '' })
class Page {}

function ask(note: 'none' | 'optional' | 'required') {
  const fixture = TestBed.createComponent(Page);
  const answer = TestBed.inject(Confirm).ask({ title: 'Decline the referral?', action: 'Decline', note });
  return { answer, root: TestbedHarnessEnvironment.documentRootLoader(fixture) };
}

describe('a question before an act', () => {
  it('wants a reason where one is required, and hands it on', async () => {
    const { answer, root } = ask('required');
    const dialog = await root.getHarness(ConfirmHarness);
    expect(await dialog.title()).toBe('Decline the referral?');
    await dialog.confirm();
    expect(await dialog.fault()).toBe('Say why, in a few words.');
    await dialog.write('  outside the appetite ');
    await dialog.confirm();
    expect(await answer).toEqual({ note: 'outside the appetite' });
  });

  it('goes on without a note where none is needed', async () => {
    const { answer, root } = ask('none');
    await (await root.getHarness(ConfirmHarness)).confirm();
    expect(await answer).toEqual({ note: '' });
  });

  it('answers null when it is not done', async () => {
    const { answer, root } = ask('optional');
    await (await root.getHarness(ConfirmHarness)).cancel();
    expect(await answer).toBeNull();
  });
});
