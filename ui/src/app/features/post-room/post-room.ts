import { ChangeDetectionStrategy, Component, inject, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { listMails } from '@leanyear/contract/house';
import { Api } from '../../core/api';
import { EventStream } from '../../core/event-stream';
import { FigurePipe, MomentPipe } from '../../shared/format/pipes';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';

const ROWS = 50;

/** Mails of the quotes the reader has part in; in demo mode as they arrived at the local post office. */
@Component({
  selector: 'ly-post-room',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [FigurePipe, MatButtonModule, MomentPipe, RouterLink, StateChip, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>Post room</h1>
          <p>Mails of the quotes that you have part in, newest first.</p>
        </div>
        <button matButton type="button" (click)="mails.reload()">Read again</button>
      </div>
      @if (mails.hasValue()) {
        @if (mails.value().items.length === 0) {
          <ly-state-panel icon="mail" title="No mails yet" detail="They are written when a quote is referred, issued, answered or bound." />
        } @else {
          <section class="sheet scroll">
            <table class="plain">
              <thead>
                <tr>
                  <th scope="col">Subject</th>
                  <th scope="col">To</th>
                  <th scope="col">Kind</th>
                  <th scope="col">Written</th>
                  <th scope="col">State</th>
                </tr>
              </thead>
              <tbody>
                @for (mail of mails.value().items; track mail.id) {
                  <tr>
                    <th scope="row"><a [routerLink]="[mail.id]">{{ mail.subject }}</a></th>
                    <td>{{ mail.to }}</td>
                    <td>{{ mail.kind }}</td>
                    <td>{{ mail.at | moment }}</td>
                    <td>
                      <ly-state-chip [state]="mail.state" />
                      @if (mail.lastError) {
                        <span class="fault">{{ mail.lastError }}</span>
                      }
                    </td>
                  </tr>
                }
              </tbody>
            </table>
            <div class="row">
              <button matButton type="button" [disabled]="offset() === 0" (click)="offset.set(offset() - pageSize)">Newer</button>
              <span class="soft">{{ mails.value().total | figure }} in all</span>
              <button matButton type="button" [disabled]="offset() + pageSize >= mails.value().total" (click)="offset.set(offset() + pageSize)">Older</button>
            </div>
          </section>
        }
      } @else {
        <ly-state-panel [of]="mails" (again)="mails.reload()" />
      }
    </div>
  `,
})
export class PostRoom {
  protected readonly pageSize = ROWS;
  protected readonly offset = signal(0);
  protected readonly mails = inject(Api).resource(listMails, () => ({ query: { offset: this.offset(), limit: ROWS } }));

  constructor() {
    inject(EventStream)
      .on('quote', 'mail')
      .pipe(takeUntilDestroyed())
      .subscribe(() => this.mails.reload());
  }
}
