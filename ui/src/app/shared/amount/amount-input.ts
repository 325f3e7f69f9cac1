import { Directive, ElementRef, forwardRef, inject } from '@angular/core';
import {
  NG_VALIDATORS,
  NG_VALUE_ACCESSOR,
  type ControlValueAccessor,
  type ValidationErrors,
  type Validator,
} from '@angular/forms';
import { LOCALE } from '../../core/locale';
import { exactAmount } from '../format/numbers';
import { parseAmount, typedAmount } from './parse-amount';

const use = forwardRef(() => AmountInput);

/**
 * Makes a text input take amounts (12.5m, 0.125bn, 250k). The form holds decimal text, `'12500000'`, or `''`; what cannot
 * be read stays as typed, with the error `{amount: words}`.
 */
@Directive({
  selector: 'input[lyAmount]',
  providers: [
    { provide: NG_VALUE_ACCESSOR, useExisting: use, multi: true },
    { provide: NG_VALIDATORS, useExisting: use, multi: true },
  ],
  host: {
    class: 'figures',
    inputmode: 'text',
    autocomplete: 'off',
    spellcheck: 'false',
    '(input)': 'typed()',
    '(blur)': 'left()',
  },
})
export class AmountInput implements ControlValueAccessor, Validator {
  private readonly element = inject<ElementRef<HTMLInputElement>>(ElementRef).nativeElement;
  private readonly locale = inject(LOCALE);
  private changed: (value: string) => void = () => undefined;
  private touched: () => void = () => undefined;
  private text = '';

  writeValue(value: string | number | null): void {
    this.text = value === null ? '' : String(value);
    this.show();
  }

  registerOnChange(changed: (value: string) => void): void {
    this.changed = changed;
  }

  registerOnTouched(touched: () => void): void {
    this.touched = touched;
  }

  setDisabledState(disabled: boolean): void {
    this.element.disabled = disabled;
  }

  validate(control: { readonly value: unknown }): ValidationErrors | null {
    const value = typeof control.value === 'string' ? control.value : '';
    const parsed = value === '' ? null : parseAmount(value);
    return parsed !== null && 'fault' in parsed ? { amount: parsed.fault } : null;
  }

  protected typed(): void {
    const typed = this.element.value;
    const parsed = typed.trim() === '' ? { text: '' } : parseAmount(typed);
    this.text = 'text' in parsed ? parsed.text : typed;
    this.element.title = 'text' in parsed && parsed.text !== '' ? exactAmount(parsed.text, this.locale) : '';
    this.changed(this.text);
  }

  protected left(): void {
    this.show();
    this.touched();
  }

  private show(): void {
    const parsed = this.text === '' ? null : parseAmount(this.text);
    this.element.value =
      parsed !== null && 'text' in parsed ? typedAmount(parsed.text, this.locale) : this.text;
    this.element.title = parsed !== null && 'text' in parsed ? exactAmount(parsed.text, this.locale) : '';
  }
}
