import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { ReactiveFormsModule, type FormControl } from '@angular/forms';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { faultOf } from '../form/faults';
import { AmountInput } from './amount-input';

/** A labelled field for one amount. In a sheet of cells take the directive `lyAmount` on a bare input instead. */
@Component({
  selector: 'ly-amount-field',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [AmountInput, MatFormFieldModule, MatInputModule, ReactiveFormsModule],
  template: `
    <mat-form-field>
      <mat-label>{{ label() }}</mat-label>
      <input matInput lyAmount [formControl]="control()" />
      @if (unit()) {
        <span matTextSuffix>&nbsp;{{ unit() }}</span>
      }
      @if (hint()) {
        <mat-hint>{{ hint() }}</mat-hint>
      }
      <mat-error>{{ faultOf(control()) }}</mat-error>
    </mat-form-field>
  `,
  styles: `
    mat-form-field {
      width: 100%;
    }
  `,
})
export class AmountField {
  readonly label = input.required<string>();
  readonly control = input.required<FormControl<string>>();
  readonly unit = input('');
  readonly hint = input('');
  protected readonly faultOf = faultOf;
}
