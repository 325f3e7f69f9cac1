import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { FormControl } from '@angular/forms';
import { aboveZero } from '../form/faults';
import { AmountField } from './amount-field';
import { AmountFieldHarness } from './amount-field.harness';

@Component({
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [AmountField],
  template: '<ly-amount-field label="Limit" unit="EUR" [control]="control" />',
})
class Page {
  readonly control = new FormControl('', { nonNullable: true, validators: aboveZero });
}

async function open() {
  const fixture = TestBed.createComponent(Page);
  const field = await TestbedHarnessEnvironment.loader(fixture).getHarness(AmountFieldHarness);
  return { control: fixture.componentInstance.control, field };
}

describe('a field for an amount', () => {
  it('takes an abbreviation, holds every digit and shows the exact figure', async () => {
    const { control, field } = await open();
    await field.type('12500k');
    expect(control.value).toBe('12500000');
    expect(await field.shown()).toBe('12.5m');
    expect(await field.exact()).toBe('12,500,000');
    expect(await field.fault()).toBe('');
  });

  it('says beside the field what is wrong and keeps what was typed', async () => {
    const { control, field } = await open();
    await field.type('12,5');
    expect(control.valid).toBe(false);
    expect(await field.shown()).toBe('12,5');
    expect(await field.fault()).toBe('Use a point for decimals; commas group thousands.');
    await field.type('0');
    expect(await field.fault()).toBe('This must be above 0.');
  });

  it('shows what the form is given', async () => {
    const { control, field } = await open();
    control.setValue('1234567.89');
    expect(await field.shown()).toBe('1,234,567.89');
    control.setValue('');
    expect(await field.shown()).toBe('');
  });
});
