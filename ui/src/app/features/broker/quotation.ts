import { ChangeDetectionStrategy, Component, effect, input, output } from '@angular/core';
import { FormArray, FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import type { BrokerQuote } from '@leanyear/contract/broker';
import { Amount } from '../../shared/amount/amount';
import { Cautions } from '../../shared/cautions/cautions';
import { faultOf } from '../../shared/form/faults';
import { DayPipe, MomentPipe, SharePipe } from '../../shared/format/pipes';
import { PercentInput } from '../../shared/percent-field/percent-input';
import { StateChip } from '../../shared/state-chip/state-chip';

export interface Order {
  readonly layers: readonly { readonly key: string; readonly orderShare: number }[];
  readonly note: string;
}

/** A quotation as its broker reads it, with the answer they may give. Knows nothing technical, nothing of the house. */
@Component({
  selector: 'ly-quotation',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Amount, Cautions, DayPipe, MatButtonModule, MatFormFieldModule, MatInputModule, MomentPipe, PercentInput, ReactiveFormsModule, SharePipe, StateChip],
  templateUrl: './quotation.html',
})
export class Quotation {
  readonly quote = input.required<BrokerQuote>();
  readonly busy = input(false);
  readonly refusal = input<readonly string[]>([]);
  readonly ordered = output<Order>();
  readonly declined = output<string>();
  protected readonly faultOf = faultOf;
  protected readonly form = new FormGroup({
    layers: new FormArray<FormControl<number | null>>([]),
    note: new FormControl('', { nonNullable: true }),
  });
  protected readonly reason = new FormControl('', { nonNullable: true, validators: [Validators.required, Validators.minLength(3)] });

  constructor() {
    effect(() => {
      this.form.setControl('layers', new FormArray(this.quote().layers.map(() => new FormControl<number | null>(1))));
    });
  }

  protected reinstatements(prices: readonly number[]): string {
    return prices.length === 0 ? 'none' : prices.map((price) => `${Number((price * 100).toFixed(4))}%`).join(', ');
  }

  protected order(): void {
    const { layers, note } = this.form.getRawValue();
    const taken = this.quote().layers.flatMap(({ key }, i) => {
      const orderShare = layers[i] ?? 0;
      return orderShare > 0 ? [{ key, orderShare }] : [];
    });
    this.ordered.emit({ layers: taken, note });
  }

  protected decline(): void {
    this.reason.markAsTouched();
    if (this.reason.valid) this.declined.emit(this.reason.value);
  }
}
