import { ChangeDetectionStrategy, Component, effect, inject, input } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatTabsModule } from '@angular/material/tabs';
import { RouterLink, RouterLinkActive, RouterOutlet } from '@angular/router';
import { EventStream } from '../../core/event-stream';
import { DeskTitle } from '../../core/title';
import { DayPipe } from '../../shared/format/pipes';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';
import { SubmissionStore } from './submission-store';

@Component({
  selector: 'ly-submission',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [DayPipe, MatTabsModule, RouterLink, RouterLinkActive, RouterOutlet, StateChip, StatePanel],
  providers: [SubmissionStore],
  template: `
    <div class="page">
      @if (store.submission.hasValue()) {
        @let it = store.submission.value();
        <div class="page-head">
          <div>
            <p class="kicker">{{ it.reference }} · treaty year {{ it.treatyYear }}</p>
            <h1>{{ it.cedant.name }}</h1>
            <p>
              {{ it.cedant.territory }}, from {{ it.inceptionOn | day }}, in {{ it.currency }}. Offered by {{ it.brokerFirm.name }} ({{ it.contact.name }}); looked after
              by {{ it.owner.name }}.
              @if (it.note) {
                <br />{{ it.note }}
              }
            </p>
          </div>
          <ly-state-chip [state]="it.state" />
        </div>
        <nav mat-tab-nav-bar [tabPanel]="panel" aria-label="Parts of the submission">
          @for (tab of tabs; track tab.path) {
            <a mat-tab-link [routerLink]="tab.path" queryParamsHandling="preserve" routerLinkActive #here="routerLinkActive" [active]="here.isActive">{{ tab.label }}</a>
          }
        </nav>
        <mat-tab-nav-panel #panel><router-outlet /></mat-tab-nav-panel>
      } @else {
        <ly-state-panel [of]="store.submission" (again)="store.reload()" />
      }
    </div>
  `,
})
export class Submission {
  protected readonly store = inject(SubmissionStore);
  readonly submissionId = input.required<string>();
  protected readonly tabs = [
    { path: 'losses', label: 'Losses' },
    { path: 'programme', label: 'Programme' },
    { path: 'price', label: 'Price' },
    { path: 'quotes', label: 'Quotes' },
  ];

  constructor() {
    const title = inject(DeskTitle);
    effect(() => this.store.id.set(this.submissionId()));
    effect(() => {
      if (this.store.submission.hasValue()) title.name(this.store.submission.value().cedant.name);
    });
    inject(EventStream)
      .on('submission')
      .pipe(takeUntilDestroyed())
      .subscribe((told) => {
        if (told.topic === 'resumed' || told.id === this.store.id()) this.store.reload();
      });
  }
}
