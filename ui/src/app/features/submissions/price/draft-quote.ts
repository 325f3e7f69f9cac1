import { ChangeDetectionStrategy, Component, effect, inject, input, signal } from '@angular/core';
import { FormArray, FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatSelectModule } from '@angular/material/select';
import { Router } from '@angular/router';
import { createQuote } from '@leanyear/contract/quotes';
import type { Run } from '@leanyear/contract/runs';
import type { QuoteKind } from '@leanyear/vocabulary';
import { firstValueFrom } from 'rxjs';
import { Api } from '../../../core/api';
import { asProblem } from '../../../core/problem';
import { AmountInput } from '../../../shared/amount/amount-input';
import { aboveZero, faultOf, sayFaults } from '../../../shared/form/faults';

const FORTNIGHT_MILLISECONDS = 14 * 24 * 3600 * 1000;

/** The way from a price to a quote: a premium for each layer, the kind and how long it stands. */
@Component({
  selector: 'ly-draft-quote',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [AmountInput, MatButtonModule, MatFormFieldModule, MatInputModule, MatSelectModule, ReactiveFormsModule],
  template: `
    <form class="sheet" [formGroup]="form" (ngSubmit)="draft()" aria-labelledby="draft">
      <h2 id="draft">Draft a quote</h2>
      <p class="soft">Premiums are for 100% and start at the technical premium. The terms are those of this run.</p>
      @for (words of refusal(); track words) {
        <p class="fault" role="alert">{{ words }}</p>
      }
      <div class="fields">
        @for (layer of layers(); track layer.key) {
          <mat-form-field>
            <mat-label>Premium of {{ layer.name }}</mat-label>
            <input matInput lyAmount [formControl]="layer.control" />
            <span matTextSuffix>&nbsp;{{ run().terms.currency }}</span>
            <mat-hint>{{ adequacy(layer.control.value, layer.technical) }}</mat-hint>
            <mat-error>{{ faultOf(layer.control) }}</mat-error>
          </mat-form-field>
        }
        <mat-form-field>
          <mat-label>Kind</mat-label>
          <mat-select formControlName="kind">
            <mat-option value="firm">Firm: a promise that holds capacity</mat-option>
            <mat-option value="indication">Indication: not binding</mat-option>
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
      <button matButton="filled" type="submit" [disabled]="busy() || run().standing !== 'current'">Draft the quote</button>
      @if (run().standing !== 'current') {
        <p class="soft">This price is {{ run().standing }}: price the programme again first.</p>
      }
    </form>
  `,
})
export class DraftQuote {
  private readonly api = inject(Api);
  private readonly router = inject(Router);
  readonly run = input.required<Run>();
  protected readonly faultOf = faultOf;
  protected readonly busy = signal(false);
  protected readonly refusal = signal<readonly string[]>([]);
  protected readonly layers = signal<readonly { readonly key: string; readonly name: string; readonly technical: number; readonly control: FormControl<string> }[]>([]);

  protected readonly form = new FormGroup({
    kind: new FormControl<QuoteKind>('firm', { nonNullable: true }),
    validUntil: new FormControl(new Date(Date.now() + FORTNIGHT_MILLISECONDS).toISOString().slice(0, 10), { nonNullable: true, validators: [Validators.required] }),
    note: new FormControl('', { nonNullable: true }),
    layers: new FormArray<FormControl<string>>([]),
  });

  constructor() {
    let drafted = '';
    effect(() => {
      const run = this.run();
      // Read again because the book moved, it is the same price still: what was typed on it stays.
      if (drafted === run.id) return;
      drafted = run.id;
      const layers = (run.result?.layers ?? []).map(({ key, name, technicalPremium }) => ({
        key,
        name,
        technical: technicalPremium,
        control: new FormControl(String(Math.ceil(technicalPremium)), { nonNullable: true, validators: [Validators.required, aboveZero] }),
      }));
      this.layers.set(layers);
      this.form.setControl('layers', new FormArray(layers.map((layer) => layer.control)));
    });
  }

  protected adequacy(premium: string, technical: number): string {
    const share = Number(premium) / technical;
    return Number.isFinite(share) && premium !== '' ? `Adequacy ${share.toFixed(3)}` : '';
  }

  protected async draft(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.busy()) return;
    this.busy.set(true);
    this.refusal.set([]);
    const { kind, validUntil, note } = this.form.getRawValue();
    const run = this.run();
    try {
      const quote = await firstValueFrom(
        this.api.send(createQuote, {
          params: { id: run.programmeId },
          body: { runId: run.id, kind, validUntil, note, layers: this.layers().map(({ key, control }) => ({ key, premium: control.value })) },
        }),
      );
      await this.router.navigate(['/quotes', quote.id]);
    } catch (error) {
      this.refusal.set(sayFaults(this.form, asProblem(error)));
    } finally {
      this.busy.set(false);
    }
  }
}
