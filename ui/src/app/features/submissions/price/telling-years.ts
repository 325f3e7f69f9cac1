import { ChangeDetectionStrategy, Component, computed, input, linkedSignal } from '@angular/core';
import type { ExplainedYear, LayerResult } from '@leanyear/contract/runs';
import { Amount } from '../../../shared/amount/amount';
import { FigurePipe, SharePipe } from '../../../shared/format/pipes';

/** Simulated years that tell a layer's price, each from its occurrences to what it adds to the price. */
@Component({
  selector: 'ly-telling-years',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Amount, FigurePipe, SharePipe],
  templateUrl: './telling-years.html',
  styleUrl: './telling-years.scss',
})
export class TellingYears {
  readonly layer = input.required<LayerResult>();
  readonly states = input.required<number>();
  readonly currency = input.required<string>();
  readonly houseCurrency = input.required<string>();

  protected readonly picked = linkedSignal<LayerResult, number>({ source: this.layer, computation: () => 0 });
  protected readonly year = computed<ExplainedYear | undefined>(() => this.layer().tellingYears[this.picked()]);

  protected pick(index: number): void {
    this.picked.set(index);
  }
}
