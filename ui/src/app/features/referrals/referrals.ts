import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { listReferrals } from '@leanyear/contract/quotes';
import { Api } from '../../core/api';
import { EventStream } from '../../core/event-stream';
import { AgoPipe } from '../../shared/format/pipes';
import { Icon } from '../../shared/icon/icon';
import { StatePanel } from '../../shared/state-panel/state-panel';

/** What has been referred, oldest first, with the rules it broke. */
@Component({
  selector: 'ly-referrals',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [AgoPipe, Icon, MatButtonModule, RouterLink, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <h1>Referrals</h1>
          <p>Quotes outside their submitter's authority, oldest first. Open one to clear, return or decline it.</p>
        </div>
      </div>
      @if (referrals.hasValue()) {
        @for (one of referrals.value(); track one.id) {
          <section class="sheet">
            <div class="page-head">
              <div>
                <p class="kicker">{{ one.reference }}, version {{ one.number }} · {{ one.programmeName }}</p>
                <h2>{{ one.cedant }}</h2>
                <p>Submitted by {{ one.submittedBy?.name ?? one.author.name }}{{ one.submittedAt ? ', ' + (one.submittedAt | ago) : '' }}</p>
              </div>
              @if (one.own) {
                <p class="soft">Yours: somebody else decides.</p>
              }
              <a matButton="filled" [routerLink]="['/quotes', one.id]">Open it</a>
            </div>
            <ul>
              @for (failure of one.failures; track $index) {
                <li><ly-icon name="block" /> {{ failure.message }}</li>
              }
            </ul>
          </section>
        } @empty {
          <ly-state-panel icon="check_circle" title="No referrals" detail="Quotes outside an underwriter's authority come here." />
        }
      } @else {
        <ly-state-panel [of]="referrals" (again)="referrals.reload()" />
      }
    </div>
  `,
})
export class Referrals {
  protected readonly referrals = inject(Api).resource(listReferrals, () => ({}));

  constructor() {
    inject(EventStream)
      .on('quote')
      .pipe(takeUntilDestroyed())
      .subscribe(() => this.referrals.reload());
  }
}
