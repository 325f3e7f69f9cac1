import { DestroyRef, Directive, effect, ElementRef, inject, input, signal } from '@angular/core';
import type { EChartsCoreOption, ECharts } from 'echarts/core';
import { ThemeChoice } from '../../core/theme-choice';
import { inkOf, type Ink } from './ink';

export type ChartOption = (ink: Ink) => EChartsCoreOption;

/** Draws a chart into its element, in the theme's ink; draws it again when the data or the scheme change. */
@Directive({
  selector: '[lyChart]',
  exportAs: 'lyChart',
  host: { role: 'img', '[attr.aria-label]': 'description()' },
})
export class Chart {
  readonly option = input.required<ChartOption>({ alias: 'lyChart' });
  /** What the chart shows, for those who hear it. */
  readonly description = input.required<string>();

  private readonly element = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;
  private readonly chart = signal<ECharts | null>(null);

  constructor() {
    const dark = inject(ThemeChoice).dark;
    const sizes = new ResizeObserver(() => this.chart()?.resize());
    let gone = false;
    inject(DestroyRef).onDestroy(() => {
      gone = true;
      sizes.disconnect();
      this.chart()?.dispose();
    });
    effect(() => {
      dark();
      this.chart()?.setOption(
        { textStyle: { fontFamily: 'inherit' }, ...this.option()(inkOf(this.element)) },
        { notMerge: false, replaceMerge: ['series'] },
      );
    });
    void import('./echarts').then(({ init }) => {
      if (gone) return;
      this.chart.set(init(this.element));
      sizes.observe(this.element);
    });
  }

  /** The chart as a picture, twice as fine as on the screen. */
  png(): string | null {
    const chart = this.chart();
    return (
      chart?.getDataURL({ type: 'png', pixelRatio: 2, backgroundColor: inkOf(this.element).sheet }) ?? null
    );
  }
}
