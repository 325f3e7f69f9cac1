import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { LOCALE } from '../../core/locale';
import { exactAmount, shortAmount } from '../format/numbers';

/** An amount at a glance; the exact figure shows on hover, is what assistive technology reads and what is copied. */
@Component({
  selector: 'ly-amount',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: `<span aria-hidden="true">{{ short() }}</span
    ><span class="unseen">{{ exact() }}</span>`,
  host: { class: 'figures', '[attr.title]': 'exact()', '(copy)': 'copy($event)' },
  styles: `
    :host {
      white-space: nowrap;
    }

    .unseen {
      user-select: none;
    }
  `,
})
export class Amount {
  private readonly locale = inject(LOCALE);
  /** A number, or decimal text as it is agreed and stored. */
  readonly value = input.required<number | string | null>();
  readonly currency = input('');

  protected readonly short = computed(() => {
    const value = this.value();
    return value === null || value === '' ? '–' : shortAmount(Number(value), this.locale);
  });
  protected readonly exact = computed(() => {
    const value = this.value();
    if (value === null || value === '') return 'none';
    return [exactAmount(value, this.locale), this.currency()].filter(Boolean).join(' ');
  });

  protected copy(event: ClipboardEvent): void {
    event.clipboardData?.setData('text/plain', String(this.value() ?? ''));
    event.preventDefault();
  }
}
