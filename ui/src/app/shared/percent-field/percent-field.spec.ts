import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { FormControl } from '@angular/forms';
import { PercentField } from './percent-field';
import { PercentFieldHarness } from './percent-field.harness';

@Component({
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [PercentField],
  template: '<ly-percent-field label="Written line" [control]="control" />',
})
class Page {
  readonly control = new FormControl<number | null>(null);
}

async function open() {
  const fixture = TestBed.createComponent(Page);
  const field = await TestbedHarnessEnvironment.loader(fixture).getHarness(PercentFieldHarness);
  return { control: fixture.componentInstance.control, field };
}

describe('a field for a percentage', () => {
  it.each([
    ['7', 0.07],
    ['12.5%', 0.125],
    ['0.29', 0.0029],
    ['100', 1],
  ])('%s is the share %d, exactly', async (typed, share) => {
    const { control, field } = await open();
    await field.type(typed);
    expect(control.value).toBe(share);
    expect(await field.fault()).toBe('');
  });

  it('shows the share it is given as a percentage', async () => {
    const { control, field } = await open();
    control.setValue(0.07);
    expect(await field.shown()).toBe('7');
  });

  it.each([
    ['120', 'This must be 100% or less.'],
    ['-3', 'This must be 0% or more.'],
    ['a tenth', 'Type a percentage such as 12.5.'],
  ])('%s is refused beside the field', async (typed, fault) => {
    const { control, field } = await open();
    await field.type(typed);
    expect(control.valid).toBe(false);
    expect(await field.fault()).toBe(fault);
  });
});
