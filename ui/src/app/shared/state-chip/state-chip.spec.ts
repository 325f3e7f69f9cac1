import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import {
  BASIS_STATES,
  CATALOGUE_STATES,
  MAIL_STATES,
  QUOTE_KINDS,
  QUOTE_STATES,
  RUN_STANDINGS,
  RUN_STATES,
  SUBMISSION_STATES,
} from '@leanyear/vocabulary';
import { LOOKS } from './looks';
import { StateChip } from './state-chip';
import { StateChipHarness } from './state-chip.harness';

const STATES = [
  QUOTE_STATES,
  QUOTE_KINDS,
  RUN_STATES,
  RUN_STANDINGS,
  CATALOGUE_STATES,
  BASIS_STATES,
  SUBMISSION_STATES,
  MAIL_STATES,
].flat();

describe('a state as a chip', () => {
  it('has a look for every state of the vocabulary, with an icon that is shipped', () => {
    const icons = readFileSync(join(__dirname, '../../../../../fonts/icons.txt'), 'utf8').split('\n');
    for (const state of STATES) expect(icons).toContain(LOOKS[state].icon);
  });

  it('says the state in words', async () => {
    const fixture = TestBed.createComponent(StateChip);
    fixture.componentRef.setInput('state', 'not taken up');
    const chip = await TestbedHarnessEnvironment.harnessForFixture(fixture, StateChipHarness);
    expect(await chip.words()).toBe('not taken up');
    expect(await chip.tone()).toBe('quiet');
  });
});
