import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { ReactiveFormsModule, type FormControl } from '@angular/forms';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { faultOf } from '../form/faults';
import { PercentInput } from './percent-input';

/** A labelled field for one percentage. In a sheet of cells take the directive `lyPercent` on a bare input instead. */
@Component({
  selector: 'ly-percent-field',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MatFormFieldModule, MatInputModule, PercentInput, ReactiveFormsModule],
  template: `
    <mat-form-field>
      <mat-label>{{ label() }}</mat-label>
      <input matInput lyPercent [least]="least()" [most]="most()" [formControl]="control()" />
      <span matTextSuffix>%</span>
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
export class PercentField {
  readonly label = input.required<string>();
  readonly control = input.required<FormControl<number | null>>();
  readonly hint = input('');
  /** Bounds as shares: 1 is 100%. */
  readonly least = input(0);
  readonly most = input(1);
  protected readonly faultOf = faultOf;
}
