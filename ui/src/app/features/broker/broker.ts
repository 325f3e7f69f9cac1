import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { listBrokerQuotes, type BrokerQuote } from '@leanyear/contract/broker';
import { Api } from '../../core/api';
import { CellTemplate } from '../../shared/data-table/cell';
import type { DataColumn } from '../../shared/data-table/columns';
import { DataTable } from '../../shared/data-table/data-table';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';

/** What the house has quoted to the reader's own firm. */
@Component({
  selector: 'ly-broker',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [CellTemplate, DataTable, StateChip, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>Quotations</h1>
          <p>What we have quoted to your firm.</p>
        </div>
      </div>
      @if (quotes.hasValue()) {
        @if (quotes.value().length === 0) {
          <ly-state-panel title="No quotations yet" detail="They appear here once they are issued to your firm, and come by e-mail." />
        } @else {
          <section class="sheet">
            <ly-data-table label="Quotations" [rows]="quotes.value()" [columns]="columns" [key]="keyOf" [link]="linkOf">
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
export class Broker {
  protected readonly quotes = inject(Api).resource(listBrokerQuotes, () => ({}));
  protected readonly keyOf = (row: BrokerQuote): string => row.id;
  protected readonly linkOf = (row: BrokerQuote): string => `/broker/${row.id}`;
  protected readonly columns: readonly DataColumn<BrokerQuote>[] = [
    { key: 'reference', header: 'Quotation', value: (row) => `${row.reference}, version ${row.number}` },
    { key: 'cedant', header: 'Cedant', value: (row) => row.cedant },
    { key: 'programme', header: 'Programme', value: (row) => row.programmeName },
    { key: 'kind', header: 'Kind', value: (row) => row.kind },
    { key: 'inception', header: 'Inception', value: (row) => row.inceptionOn, figures: true },
    { key: 'until', header: 'Valid until', value: (row) => row.validUntil, figures: true },
    { key: 'underwriter', header: 'Underwriter', value: (row) => row.underwriter.name },
    { key: 'state', header: 'State', value: (row) => row.state },
  ];
}
