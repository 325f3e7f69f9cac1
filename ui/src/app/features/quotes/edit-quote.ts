import { ChangeDetectionStrategy, Component, effect, inject, input, output, signal } from '@angular/core';
import { FormArray, FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatSelectModule } from '@angular/material/select';
import { updateQuote, type Quote } from '@leanyear/contract/quotes';
import type { QuoteKind } from '@leanyear/vocabulary';
import { firstValueFrom } from 'rxjs';
import { Api } from '../../core/api';
import { asProblem } from '../../core/problem';
import { AmountInput } from '../../shared/amount/amount-input';
import { aboveZero, faultOf, sayFaults } from '../../shared/form/faults';

/** A draft's premiums, kind and validity; its terms are those of its run. */
@Component({
  selector: 'ly-edit-quote',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [AmountInput, MatButtonModule, MatFormFieldModule, MatInputModule, MatSelectModule, ReactiveFormsModule],
  template: `
    <form class="sheet" [formGroup]="form" (ngSubmit)="save()" aria-labelledby="edit">
      <h2 id="edit">Change the draft</h2>
      @for (words of refusal(); track words) {
        <p class="fault" role="alert">{{ words }}</p>
      }
      <div class="fields">
        @for (layer of quote().layers; track layer.key; let i = $index) {
          @if (form.controls.layers.at(i); as control) {
            <mat-form-field>
              <mat-label>Premium of {{ layer.name }}</mat-label>
              <input matInput lyAmount [formControl]="control" />
              <span matTextSuffix>&nbsp;{{ quote().currency }}</span>
              <mat-error>{{ faultOf(control) }}</mat-error>
            </mat-form-field>
          }
        }
        <mat-form-field>
          <mat-label>Kind</mat-label>
          <mat-select formControlName="kind">
            <mat-option value="firm">Firm</mat-option>
            <mat-option value="indication">Indication</mat-option>
          </mat-select>
        </mat-form-field>
        <mat-form-field>
          <mat-label>Valid until</mat-label>
          <input matInput type="date" formControlName="validUntil" />
          <mat-error>{{ faultOf(form.controls.validUntil) }}</mat-error>
        </mat-form-field>
      </div>
      <mat-form-field class="wide">
        <mat-label>Note for the house</mat-label>
        <textarea matInput rows="2" formControlName="note"></textarea>
      </mat-form-field>
      <div class="row">
        <button matButton="filled" type="submit" [disabled]="busy()">Save the draft</button>
        <button matButton type="button" (click)="left.emit()">Leave it as it was</button>
      </div>
    </form>
  `,
})
export class EditQuote {
  private readonly api = inject(Api);
  readonly quote = input.required<Quote>();
  readonly saved = output<Quote>();
  readonly left = output();
  protected readonly faultOf = faultOf;
  protected readonly busy = signal(false);
  protected readonly refusal = signal<readonly string[]>([]);
  protected readonly form = new FormGroup({
    kind: new FormControl<QuoteKind>('firm', { nonNullable: true }),
    validUntil: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    note: new FormControl('', { nonNullable: true }),
    layers: new FormArray<FormControl<string>>([]),
  });

  constructor() {
    effect(() => {
      const { kind, validUntil, note, layers } = this.quote();
      this.form.patchValue({ kind, validUntil, note });
      const premiums = layers.map(({ premium }) => new FormControl(premium, { nonNullable: true, validators: [Validators.required, aboveZero] }));
      this.form.setControl('layers', new FormArray(premiums));
    });
  }

  protected async save(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.busy()) return;
    this.busy.set(true);
    const { kind, validUntil, note, layers } = this.form.getRawValue();
    const quote = this.quote();
    try {
      const body = { runId: quote.runId, kind, validUntil, note, layers: quote.layers.map(({ key }, i) => ({ key, premium: layers[i] ?? '' })) };
      this.saved.emit(await firstValueFrom(this.api.send(updateQuote, { params: { id: quote.id }, body, ifMatch: quote.version })));
    } catch (error) {
      this.refusal.set(sayFaults(this.form, asProblem(error)));
    } finally {
      this.busy.set(false);
    }
  }
}
