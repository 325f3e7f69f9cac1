import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { Amount } from '../amount/amount';
import { SharePipe } from '../format/pipes';
import { waterfallRows, type PremiumSplit } from './waterfall-rows';

/** The premium taken apart, from expected loss to technical premium: a table whose rows draw themselves. */
@Component({
  selector: 'ly-split-waterfall',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Amount, SharePipe],
  templateUrl: './split-waterfall.html',
  styleUrl: './split-waterfall.scss',
})
export class SplitWaterfall {
  readonly split = input.required<PremiumSplit>();
  readonly currency = input('');
  readonly label = input('Where the premium comes from');
  /** Lines of no amount say nothing; totals always stand. */
  protected readonly rows = computed(() =>
    waterfallRows(this.split()).filter((row) => row.kind === 'total' || row.amount !== 0),
  );
  protected readonly whole = computed(() => this.split().technicalPremium);
}
