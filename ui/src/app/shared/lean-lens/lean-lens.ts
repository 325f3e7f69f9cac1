import { ChangeDetectionStrategy, Component, computed, input, signal, viewChild } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import type { LensBin } from '@leanyear/contract/runs';
import { Chart, type ChartOption } from '../chart/chart';
import { LAYER_COLOURS } from '../chart/ink';
import { downloadPicture } from '../chart/picture';
import { downloadCsv } from '../csv/csv';
import { FigurePipe, SharePipe } from '../format/pipes';
import { Icon } from '../icon/icon';
import { lensOption, type LensLayer } from './lens-option';

/** Layers shown at first: more than three hide one another. */
const AT_FIRST = 3;

/**
 * All states of the year from the leanest to the most plentiful: how hungry the house is (above), what the layer pays
 * (middle), and their product (below), whose area is the price. Behind it the same figures as a table.
 */
@Component({
  selector: 'ly-lean-lens',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Chart, FigurePipe, Icon, MatButtonModule, SharePipe],
  templateUrl: './lean-lens.html',
  styleUrl: './lean-lens.scss',
})
export class LeanLens {
  readonly bins = input.required<readonly LensBin[]>();
  /** Names of the layers, in the order of the bins' lists. */
  readonly layers = input.required<readonly string[]>();
  /** Names the downloads. */
  readonly name = input('lean lens');

  private readonly chart = viewChild(Chart);
  private readonly chosen = signal<ReadonlySet<number> | null>(null);
  protected readonly asTable = signal(false);
  protected readonly choices = computed(() => {
    const chosen = this.chosen();
    return this.layers().map((name, index) => ({
      name,
      index,
      on: chosen?.has(index) ?? index < AT_FIRST,
      colour: (index % LAYER_COLOURS) + 1,
    }));
  });
  protected readonly shown = computed<readonly LensLayer[]>(() =>
    this.choices().filter((choice) => choice.on),
  );
  protected readonly option = computed<ChartOption>(() => {
    const bins = this.bins();
    const layers = this.shown();
    return (ink) => lensOption(ink, bins, layers);
  });
  protected readonly description = computed(() => {
    const bins = this.bins();
    const names = this.shown()
      .map((layer) => layer.name)
      .join(', ');
    const hungriest = bins[0]?.hunger ?? 0;
    return `Lean lens of ${names}: in the leanest states one unit is worth ${hungriest.toPrecision(3)} times its average, in the most plentiful ${(bins.at(-1)?.hunger ?? 0).toPrecision(3)} times. The figures are in the table.`;
  });

  protected toggle(index: number): void {
    const on = new Set(this.shown().map((layer) => layer.index));
    if (!on.delete(index)) on.add(index);
    // The last one stays: a lens without a layer shows nothing.
    if (on.size > 0) this.chosen.set(on);
  }

  protected picture(): void {
    const address = this.chart()?.png() ?? null;
    if (address !== null) downloadPicture(`${this.name()}.png`, address);
  }

  protected save(): void {
    const names = this.layers();
    const header = [
      'share from',
      'share to',
      'hunger',
      ...names.flatMap((name) => [`${name} payoff`, `${name} product`, `${name} without hunger`]),
    ];
    const rows = this.bins().map((bin) => [
      bin.shareFrom,
      bin.shareTo,
      bin.hunger,
      ...names.flatMap((_, i) => [bin.payoff[i] ?? 0, bin.product[i] ?? 0, bin.plain[i] ?? 0]),
    ]);
    downloadCsv(`${this.name()}.csv`, [header, ...rows]);
  }
}
