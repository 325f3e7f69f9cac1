import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { takeUntilDestroyed, toSignal } from '@angular/core/rxjs-interop';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatSelectModule } from '@angular/material/select';
import { listQuotes, type QuoteSummary } from '@leanyear/contract/quotes';
import { QUOTE_STATES, type QuoteState } from '@leanyear/vocabulary';
import { AddressState } from '../../core/address-state';
import { Api } from '../../core/api';
import { EventStream } from '../../core/event-stream';
import { LOCALE } from '../../core/locale';
import { CellTemplate } from '../../shared/data-table/cell';
import type { DataColumn } from '../../shared/data-table/columns';
import { DataTable } from '../../shared/data-table/data-table';
import { exactAmount } from '../../shared/format/numbers';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';

@Component({
  selector: 'ly-quotes',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [CellTemplate, DataTable, MatFormFieldModule, MatSelectModule, StateChip, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>Quotes</h1>
          <p>Every version of every quote, newest first.</p>
        </div>
        <mat-form-field>
          <mat-label>State</mat-label>
          <mat-select [value]="state() ?? ''" (selectionChange)="pick($event.value)">
            <mat-option value="">All</mat-option>
            @for (one of states; track one) {
              <mat-option [value]="one">{{ one }}</mat-option>
            }
          </mat-select>
        </mat-form-field>
      </div>
      @if (quotes.hasValue()) {
        @if (quotes.value().length === 0) {
          <ly-state-panel title="No quotes here" detail="A quote is drafted from the price of a programme, under Submissions." />
        } @else {
          <section class="sheet">
            <ly-data-table label="Quotes" [rows]="quotes.value()" [columns]="columns" [key]="keyOf" [link]="linkOf">
              <ng-template lyCell="state" [lyCellOf]="quotes.value()" let-row><ly-state-chip [state]="row.state" /></ng-template>
              <ng-template lyCell="kind" [lyCellOf]="quotes.value()" let-row><ly-state-chip [state]="row.kind" /></ng-template>
            </ly-data-table>
          </section>
        }
      } @else {
        <ly-state-panel [of]="quotes" (again)="quotes.reload()" />
      }
    </div>
  `,
})
export class Quotes {
  private readonly address = inject(AddressState);
  private readonly locale = inject(LOCALE);
  private readonly query = toSignal(this.address.query);
  protected readonly states = QUOTE_STATES;
  protected readonly state = computed(() => QUOTE_STATES.find((one) => one === this.query()?.get('state')));
  protected readonly quotes = inject(Api).resource(listQuotes, () => ({ query: { state: this.state() } }));
  protected readonly keyOf = (row: QuoteSummary): string => row.id;
  protected readonly linkOf = (row: QuoteSummary): string => `/quotes/${row.id}`;
  protected readonly columns: readonly DataColumn<QuoteSummary>[] = [
    { key: 'reference', header: 'Quote', value: (row) => `${row.reference}, version ${row.number}` },
    { key: 'cedant', header: 'Cedant', value: (row) => row.cedant },
    { key: 'programme', header: 'Programme', value: (row) => row.programmeName },
    { key: 'broker', header: 'Broker', value: (row) => row.brokerFirm.name },
    { key: 'kind', header: 'Kind', value: (row) => row.kind },
    { key: 'share', header: 'Our premium', value: (row) => Number(row.houseShareOfPremium), text: (row) => exactAmount(row.houseShareOfPremium, this.locale), figures: true },
    { key: 'currency', header: 'Currency', value: (row) => row.currency },
    { key: 'adequacy', header: 'Lowest adequacy', value: (row) => Number(row.lowestAdequacy.toFixed(3)), figures: true },
    { key: 'until', header: 'Valid until', value: (row) => row.validUntil, figures: true },
    { key: 'author', header: 'Author', value: (row) => row.author.name },
    { key: 'state', header: 'State', value: (row) => row.state },
  ];

  constructor() {
    inject(EventStream)
      .on('quote')
      .pipe(takeUntilDestroyed())
      .subscribe(() => this.quotes.reload());
  }

  protected pick(state: QuoteState | ''): void {
    void this.address.set({ state: state === '' ? null : state });
  }
}
