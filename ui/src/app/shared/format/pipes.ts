import { inject, Pipe, type PipeTransform } from '@angular/core';
import { LOCALE } from '../../core/locale';
import { ago, day, lasting, moment } from './dates';
import { figure, percent, shortAmount } from './numbers';

/** `{{ '12500000' | amount }}` → 12.5m. Where the exact figure must be at hand, take `<ly-amount>`. */
@Pipe({ name: 'amount' })
export class AmountPipe implements PipeTransform {
  private readonly locale = inject(LOCALE);
  transform(value: number | string | null | undefined): string {
    return value === null || value === undefined || value === ''
      ? '–'
      : shortAmount(Number(value), this.locale);
  }
}

/** `{{ 0.125 | share }}` → 12.50%; the second figure counts the decimals. */
@Pipe({ name: 'share' })
export class SharePipe implements PipeTransform {
  private readonly locale = inject(LOCALE);
  transform(value: number | null | undefined, decimals = 2): string {
    return value === null || value === undefined ? '–' : percent(value, this.locale, decimals);
  }
}

/** `{{ 1234.5 | figure: 1 }}` → 1,234.5 */
@Pipe({ name: 'figure' })
export class FigurePipe implements PipeTransform {
  private readonly locale = inject(LOCALE);
  transform(value: number | null | undefined, decimals = 0): string {
    return value === null || value === undefined ? '–' : figure(value, this.locale, decimals);
  }
}

/** `{{ '2027-01-01' | day }}` */
@Pipe({ name: 'day' })
export class DayPipe implements PipeTransform {
  private readonly locale = inject(LOCALE);
  transform(value: string | null | undefined): string {
    return value ? day(value, this.locale) : '–';
  }
}

/** `{{ quote.issuedAt | moment }}` */
@Pipe({ name: 'moment' })
export class MomentPipe implements PipeTransform {
  private readonly locale = inject(LOCALE);
  transform(value: string | null | undefined): string {
    return value ? moment(value, this.locale) : '–';
  }
}

/** `{{ item.since | ago }}`, as of when it is drawn. */
@Pipe({ name: 'ago' })
export class AgoPipe implements PipeTransform {
  private readonly locale = inject(LOCALE);
  transform(value: string | null | undefined): string {
    return value ? ago(value, Date.now(), this.locale) : '–';
  }
}

/** `{{ seconds | lasting }}` → 40 seconds */
@Pipe({ name: 'lasting' })
export class LastingPipe implements PipeTransform {
  private readonly locale = inject(LOCALE);
  transform(value: number): string {
    return lasting(value, this.locale);
  }
}
