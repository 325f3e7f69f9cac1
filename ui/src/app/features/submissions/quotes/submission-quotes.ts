import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { listQuotes, type QuoteSummary } from '@leanyear/contract/quotes';
import { Api } from '../../../core/api';
import { CellTemplate } from '../../../shared/data-table/cell';
import type { DataColumn } from '../../../shared/data-table/columns';
import { DataTable } from '../../../shared/data-table/data-table';
import { StateChip } from '../../../shared/state-chip/state-chip';
import { StatePanel } from '../../../shared/state-panel/state-panel';
import { SubmissionStore } from '../submission-store';

@Component({
  selector: 'ly-submission-quotes',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [CellTemplate, DataTable, StateChip, StatePanel],
  template: `
    @if (quotes.hasValue()) {
      @if (quotes.value().length === 0) {
        <ly-state-panel title="No quotes yet" detail="Price a programme, then draft a quote from its price." />
      } @else {
        <section class="sheet">
          <ly-data-table label="Quotes" [rows]="quotes.value()" [columns]="columns" [key]="keyOf" [link]="linkOf">
            <ng-template lyCell="state" [lyCellOf]="quotes.value()" let-row><ly-state-chip [state]="row.state" /></ng-template>
          </ly-data-table>
        </section>
      }
    } @else {
      <ly-state-panel [of]="quotes" (again)="quotes.reload()" />
    }
  `,
})
export class SubmissionQuotes {
  private readonly store = inject(SubmissionStore);
  protected readonly quotes = inject(Api).resource(listQuotes, () => {
    const submissionId = this.store.id();
    return submissionId === undefined ? undefined : { query: { submissionId } };
  });
  protected readonly keyOf = (row: QuoteSummary): string => row.id;
  protected readonly linkOf = (row: QuoteSummary): string => `/quotes/${row.id}`;
  protected readonly columns: readonly DataColumn<QuoteSummary>[] = [
    { key: 'reference', header: 'Quote', value: (row) => `${row.reference}, version ${row.number}` },
    { key: 'programme', header: 'Programme', value: (row) => row.programmeName },
    { key: 'kind', header: 'Kind', value: (row) => row.kind },
    { key: 'adequacy', header: 'Lowest adequacy', value: (row) => Number(row.lowestAdequacy.toFixed(3)), figures: true },
    { key: 'until', header: 'Valid until', value: (row) => row.validUntil, figures: true },
    { key: 'author', header: 'Author', value: (row) => row.author.name },
    { key: 'state', header: 'State', value: (row) => row.state },
  ];
}
