import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { listBookVersions, listZones, readBook, type BookContract } from '@leanyear/contract/house';
import { Api } from '../../core/api';
import { EventStream } from '../../core/event-stream';
import { LOCALE } from '../../core/locale';
import { Amount } from '../../shared/amount/amount';
import type { DataColumn } from '../../shared/data-table/columns';
import { DataTable } from '../../shared/data-table/data-table';
import { exactAmount } from '../../shared/format/numbers';
import { MomentPipe, SharePipe } from '../../shared/format/pipes';
import { StatePanel } from '../../shared/state-panel/state-panel';

@Component({
  selector: 'ly-book',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Amount, DataTable, MomentPipe, SharePipe, StatePanel],
  templateUrl: './book.html',
  styleUrl: './book.scss',
})
export class BookPage {
  private readonly api = inject(Api);
  private readonly locale = inject(LOCALE);
  protected readonly book = this.api.resource(readBook, () => ({}));
  protected readonly zones = this.api.resource(listZones, () => ({}));
  protected readonly versions = this.api.resource(listBookVersions, () => ({ query: { limit: 20 } }));
  protected readonly opened = signal<BookContract | null>(null);
  protected readonly bars = computed(() =>
    (this.zones.hasValue() ? this.zones.value() : []).map((zone) => {
      const capacity = Number(zone.capacity) || 1;
      return { zone, used: Number(zone.used) / capacity, held: Number(zone.held) / capacity };
    }),
  );
  protected readonly keyOf = (row: BookContract): string => row.id;
  protected readonly columns: readonly DataColumn<BookContract>[] = [
    { key: 'cedant', header: 'Cedant', value: (row) => row.cedant },
    { key: 'name', header: 'Programme', value: (row) => row.name },
    { key: 'broker', header: 'Broker', value: (row) => row.brokerFirm },
    { key: 'inception', header: 'Inception', value: (row) => row.inceptionOn, figures: true },
    { key: 'layers', header: 'Layers', value: (row) => row.layers.length, figures: true },
    { key: 'premium', header: 'Our premium', value: (row) => Number(row.houseShareOfPremium), text: (row) => exactAmount(row.houseShareOfPremium, this.locale), figures: true },
    { key: 'currency', header: 'Currency', value: (row) => row.currency },
    { key: 'origin', header: 'From', value: (row) => row.origin },
    { key: 'entered', header: 'Entered in version', value: (row) => row.enteredInVersion, figures: true },
  ];

  constructor() {
    inject(EventStream)
      .on('book', 'quote')
      .pipe(takeUntilDestroyed())
      .subscribe(() => {
        this.book.reload();
        this.zones.reload();
        this.versions.reload();
      });
  }
}
