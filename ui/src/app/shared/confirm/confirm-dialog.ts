import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { FormControl, ReactiveFormsModule, type ValidatorFn } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MAT_DIALOG_DATA, MatDialogModule, MatDialogRef } from '@angular/material/dialog';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { faultOf } from '../form/faults';
import type { Confirmed, Question } from './confirm';

/** The API wants three characters of a reason and takes four thousand of a note. */
const FEWEST = 3;
const MOST = 4000;

const reasoned: ValidatorFn = (control) =>
  String(control.value).trim().length < FEWEST ? { reason: 'Say why, in a few words.' } : null;
const shortEnough: ValidatorFn = (control) =>
  String(control.value).length > MOST ? { long: 'This is longer than 4,000 characters.' } : null;

@Component({
  selector: 'ly-confirm-dialog',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MatButtonModule, MatDialogModule, MatFormFieldModule, MatInputModule, ReactiveFormsModule],
  templateUrl: './confirm-dialog.html',
  styles: `
    mat-dialog-content {
      display: grid;
      gap: var(--ly-space-4);
    }

    mat-form-field {
      margin-top: var(--ly-space-1);
    }
  `,
})
export class ConfirmDialog {
  protected readonly question = inject<Question>(MAT_DIALOG_DATA);
  private readonly dialog = inject<MatDialogRef<ConfirmDialog, Confirmed>>(MatDialogRef);
  protected readonly faultOf = faultOf;
  protected readonly note = new FormControl('', {
    nonNullable: true,
    validators: this.question.note === 'required' ? [reasoned, shortEnough] : [shortEnough],
  });

  protected confirm(event: Event): void {
    event.preventDefault();
    this.note.markAsTouched();
    if (this.note.valid) this.dialog.close({ note: this.note.value.trim() });
  }
}
