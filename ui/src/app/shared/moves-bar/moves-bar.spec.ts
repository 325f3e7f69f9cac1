import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import type { MoveOffer } from '@leanyear/contract/quotes';
import { ConfirmHarness } from '../confirm/confirm.harness';
import { MovesBar, type ChosenMove } from './moves-bar';
import { MovesBarHarness } from './moves-bar.harness';

const MOVES: readonly MoveOffer[] = [
  { move: 'withdraw', label: 'Withdraw', allowed: true, reasons: [], needsNote: true },
  { move: 'issue', label: 'Issue to the broker', allowed: true, reasons: [], needsNote: false },
  {
    move: 'bind',
    label: 'Bind',
    allowed: false,
    needsNote: false,
    reasons: [
      { code: 'state', message: 'It has not been ordered.' },
      { code: 'validity', message: 'Its validity ended on 3 June.' },
    ],
  },
];

async function open() {
  const fixture = TestBed.createComponent(MovesBar);
  fixture.componentRef.setInput('moves', MOVES);
  const chosen: ChosenMove[] = [];
  fixture.componentInstance.chosen.subscribe((move) => chosen.push(move));
  const bar = await TestbedHarnessEnvironment.harnessForFixture(fixture, MovesBarHarness);
  return { bar, chosen, root: TestbedHarnessEnvironment.documentRootLoader(fixture) };
}

describe('the moves that are open', () => {
  it('offers what the server allows and gives every reason for what it refuses', async () => {
    const { bar } = await open();
    expect(await bar.offered()).toEqual(['Withdraw', 'Issue to the broker']);
    expect(await bar.reasons()).toEqual(['It has not been ordered.', 'Its validity ended on 3 June.']);
  });

  it('asks first, and for a reason where the server wants one', async () => {
    const { bar, chosen, root } = await open();
    await bar.choose('Withdraw');
    const dialog = await root.getHarness(ConfirmHarness);
    await dialog.confirm();
    expect(chosen).toEqual([]);
    await dialog.write('placed elsewhere');
    await dialog.confirm();
    expect(chosen).toEqual([{ move: 'withdraw', note: 'placed elsewhere' }]);
  });
});
