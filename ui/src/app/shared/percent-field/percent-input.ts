import { Directive, ElementRef, forwardRef, inject, input } from '@angular/core';
import {
  NG_VALIDATORS,
  NG_VALUE_ACCESSOR,
  type ControlValueAccessor,
  type ValidationErrors,
  type Validator,
} from '@angular/forms';
import { LOCALE } from '../../core/locale';
import { percent } from '../format/numbers';
import { parsePercent, typedPercent } from './parse-percent';

const use = forwardRef(() => PercentInput);

/**
 * Makes a text input take percentages. The form holds the share (12.5 is 0.125), or null where nothing is typed or it
 * cannot be read; then the error is `{percent: words}`. Bounds are shares too.
 */
@Directive({
  selector: 'input[lyPercent]',
  providers: [
    { provide: NG_VALUE_ACCESSOR, useExisting: use, multi: true },
    { provide: NG_VALIDATORS, useExisting: use, multi: true },
  ],
  host: {
    class: 'figures',
    inputmode: 'decimal',
    autocomplete: 'off',
    '(input)': 'typed()',
    '(blur)': 'left()',
  },
})
export class PercentInput implements ControlValueAccessor, Validator {
  readonly least = input(0);
  readonly most = input(1);
  private readonly element = inject<ElementRef<HTMLInputElement>>(ElementRef).nativeElement;
  private readonly locale = inject(LOCALE);
  private changed: (value: number | null) => void = () => undefined;
  private touched: () => void = () => undefined;
  private fault = '';

  writeValue(value: number | null): void {
    this.fault = '';
    this.element.value = value === null ? '' : typedPercent(value);
  }

  registerOnChange(changed: (value: number | null) => void): void {
    this.changed = changed;
  }

  registerOnTouched(touched: () => void): void {
    this.touched = touched;
  }

  setDisabledState(disabled: boolean): void {
    this.element.disabled = disabled;
  }

  validate(control: { readonly value: unknown }): ValidationErrors | null {
    if (this.fault !== '') return { percent: this.fault };
    if (typeof control.value !== 'number') return null;
    const words = (share: number): string => percent(share, this.locale, 0);
    if (control.value < this.least()) return { percent: `This must be ${words(this.least())} or more.` };
    return control.value > this.most() ? { percent: `This must be ${words(this.most())} or less.` } : null;
  }

  protected typed(): void {
    const typed = this.element.value;
    const parsed = typed.trim() === '' ? { share: null } : parsePercent(typed);
    this.fault = 'fault' in parsed ? parsed.fault : '';
    this.changed('share' in parsed ? parsed.share : null);
  }

  protected left(): void {
    const parsed = parsePercent(this.element.value);
    if ('share' in parsed) this.element.value = typedPercent(parsed.share);
    this.touched();
  }
}
