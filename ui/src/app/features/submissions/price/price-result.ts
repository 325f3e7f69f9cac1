import { ChangeDetectionStrategy, Component, computed, input, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import type { ProgrammeTerms } from '@leanyear/contract/programmes';
import type { RunResult } from '@leanyear/contract/runs';
import { Amount } from '../../../shared/amount/amount';
import { FigurePipe, SharePipe } from '../../../shared/format/pipes';
import { LeanLens } from '../../../shared/lean-lens/lean-lens';
import { SplitWaterfall } from '../../../shared/split-waterfall/split-waterfall';
import { TellingYears } from './telling-years';

/** What a run says: prices a column a layer, the lens, the premium taken apart, and the measures behind them. */
@Component({
  selector: 'ly-price-result',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Amount, FigurePipe, LeanLens, MatButtonModule, SharePipe, SplitWaterfall, TellingYears],
  templateUrl: './price-result.html',
  styleUrl: './price-result.scss',
})
export class PriceResult {
  readonly result = input.required<RunResult>();
  readonly terms = input.required<ProgrammeTerms>();

  protected readonly names = computed(() => this.result().layers.map((layer) => layer.name));
  private readonly picked = signal<string | null>(null);
  protected readonly layer = computed(() => {
    const layers = this.result().layers;
    return layers.find((one) => one.key === this.picked()) ?? layers[layers.length - 1];
  });
  /** Layers with their terms, in the order of the sheet. */
  protected readonly columns = computed(() =>
    this.result().layers.map((layer) => ({ layer, terms: this.terms().layers.find((one) => one.key === layer.key) })),
  );
  protected readonly thin = computed(() => this.result().layers.filter((layer) => layer.thin).map((layer) => layer.name));

  protected pick(key: string): void {
    this.picked.set(key);
  }

  protected number(text: string | undefined): number {
    return Number(text ?? 0);
  }
}
