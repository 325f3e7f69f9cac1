import { ChangeDetectionStrategy, Component, inject, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { listAudit } from '@leanyear/contract/house';
import { Api } from '../../core/api';
import { FigurePipe, MomentPipe } from '../../shared/format/pipes';
import { Icon } from '../../shared/icon/icon';
import { StatePanel } from '../../shared/state-panel/state-panel';

const ROWS = 50;

/** Who did what, newest first. A sealed entry is part of the chain that nobody can alter unseen. */
@Component({
  selector: 'ly-audit',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [FigurePipe, Icon, MatButtonModule, MomentPipe, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>Audit trail</h1>
          <p>Every act, newest first. Entries are added and never changed; each is sealed into a chain within a second.</p>
        </div>
        <button matButton type="button" (click)="entries.reload()">Read again</button>
      </div>
      @if (entries.hasValue()) {
        <section class="sheet scroll">
          <table class="plain">
            <thead>
              <tr>
                <th scope="col" class="figures">No.</th>
                <th scope="col">When</th>
                <th scope="col">Who</th>
                <th scope="col">What</th>
                <th scope="col">From and to</th>
                <th scope="col">Why</th>
                <th scope="col">Sealed</th>
              </tr>
            </thead>
            <tbody>
              @for (entry of entries.value().items; track entry.id) {
                <tr>
                  <td class="figures">{{ entry.id }}</td>
                  <td>{{ entry.at | moment }}</td>
                  <th scope="row">{{ entry.actor }}</th>
                  <td>{{ entry.action }}</td>
                  <td>{{ entry.to ? (entry.from ?? '–') + ' → ' + entry.to : '' }}</td>
                  <td>{{ entry.note }}</td>
                  <td><ly-icon [name]="entry.sealed ? 'lock' : 'lock_open'" /> {{ entry.sealed ? 'sealed' : 'not yet' }}</td>
                </tr>
              }
            </tbody>
          </table>
          <div class="row">
            <button matButton type="button" [disabled]="offset() === 0" (click)="offset.set(offset() - pageSize)">Newer</button>
            <span class="soft">{{ entries.value().total | figure }} in all</span>
            <button matButton type="button" [disabled]="offset() + pageSize >= entries.value().total" (click)="offset.set(offset() + pageSize)">Older</button>
          </div>
        </section>
      } @else {
        <ly-state-panel [of]="entries" (again)="entries.reload()" />
      }
    </div>
  `,
})
export class Audit {
  protected readonly pageSize = ROWS;
  protected readonly offset = signal(0);
  protected readonly entries = inject(Api).resource(listAudit, () => ({ query: { offset: this.offset(), limit: ROWS } }));
}
