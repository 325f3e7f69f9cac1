import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { listSubmissions, type SubmissionSummary } from '@leanyear/contract/submissions';
import { Api } from '../../core/api';
import { SessionStore } from '../../core/session';
import { CellTemplate } from '../../shared/data-table/cell';
import type { DataColumn } from '../../shared/data-table/columns';
import { DataTable } from '../../shared/data-table/data-table';
import { Icon } from '../../shared/icon/icon';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';

@Component({
  selector: 'ly-submissions',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [CellTemplate, DataTable, Icon, MatButtonModule, RouterLink, StateChip, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>Submissions</h1>
          <p>What cedants have offered for a treaty year: their losses, the programmes asked for, and our answers.</p>
        </div>
        @if (mayWrite) {
          <a matButton="filled" routerLink="new"><ly-icon name="add" /> Open a submission</a>
        }
      </div>
      @if (submissions.hasValue()) {
        @if (submissions.value().length === 0) {
          <ly-state-panel title="No submission is open" detail="A submission starts the work: it names the cedant, the broker and the treaty year." />
        } @else {
          <section class="sheet">
            <ly-data-table label="Submissions" [rows]="submissions.value()" [columns]="columns" [key]="keyOf" [link]="linkOf">
              <ng-template lyCell="state" [lyCellOf]="submissions.value()" let-row><ly-state-chip [state]="row.state" /></ng-template>
            </ly-data-table>
          </section>
        }
      } @else {
        <ly-state-panel [of]="submissions" (again)="submissions.reload()" />
      }
    </div>
  `,
})
export class Submissions {
  protected readonly mayWrite = inject(SessionStore).may('submissions.write');
  protected readonly submissions = inject(Api).resource(listSubmissions, () => ({}));
  protected readonly keyOf = (row: SubmissionSummary): string => row.id;
  protected readonly linkOf = (row: SubmissionSummary): string => `/submissions/${row.id}`;
  protected readonly columns: readonly DataColumn<SubmissionSummary>[] = [
    { key: 'reference', header: 'Reference', value: (row) => row.reference },
    { key: 'cedant', header: 'Cedant', value: (row) => row.cedant.name },
    { key: 'broker', header: 'Broker', value: (row) => row.brokerFirm.name },
    { key: 'year', header: 'Treaty year', value: (row) => row.treatyYear, text: (row) => String(row.treatyYear), figures: true },
    { key: 'inception', header: 'Inception', value: (row) => row.inceptionOn, figures: true },
    { key: 'currency', header: 'Currency', value: (row) => row.currency },
    { key: 'tables', header: 'Loss tables', value: (row) => row.lossTableCount, figures: true },
    { key: 'programmes', header: 'Programmes', value: (row) => row.programmeCount, figures: true },
    { key: 'owner', header: 'Underwriter', value: (row) => row.owner.name },
    { key: 'state', header: 'State', value: (row) => row.state },
  ];
}
