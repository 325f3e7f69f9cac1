import { ChangeDetectionStrategy, Component, inject, input } from '@angular/core';
import { RouterLink } from '@angular/router';
import { readMail } from '@leanyear/contract/house';
import { Api } from '../../core/api';
import { MomentPipe } from '../../shared/format/pipes';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';

/** One mail as its reader got it. The text is shown as text: what came by mail never becomes part of our page. */
@Component({
  selector: 'ly-mail',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MomentPipe, RouterLink, StateChip, StatePanel],
  template: `
    <div class="page">
      @if (mail.hasValue()) {
        @let it = mail.value();
        <div class="page-head">
          <div>
            <p class="kicker"><a routerLink="/post-room">Post room</a> · {{ it.kind }}</p>
            <h1>{{ it.subject }}</h1>
            <p>To {{ it.to }}, {{ it.at | moment }}</p>
          </div>
          <ly-state-chip [state]="it.state" />
        </div>
        <section class="sheet">
          @if (it.text; as text) {
            <pre class="letter">{{ text }}</pre>
          } @else {
            <ly-state-panel icon="mail" title="Its text is not here" detail="Only the demo's own post office keeps what it delivered." />
          }
          <dl class="facts">
            <dt>Message id</dt>
            <dd class="figures">{{ it.messageId }}</dd>
            <dt>Attempts</dt>
            <dd>{{ it.attempts }}</dd>
            @if (it.arrived !== null) {
              <dt>Copies that arrived</dt>
              <dd>{{ it.arrived }}</dd>
            }
            @if (it.lastError) {
              <dt>Last trouble</dt>
              <dd class="fault">{{ it.lastError }}</dd>
            }
            @if (it.quoteId) {
              <dt>About</dt>
              <dd><a [routerLink]="['/quotes', it.quoteId]">the quote</a></dd>
            }
          </dl>
        </section>
      } @else {
        <ly-state-panel [of]="mail" (again)="mail.reload()" />
      }
    </div>
  `,
  styles: `
    .letter {
      font: inherit;
      font-family: var(--ly-figures);
      line-height: 1.5;
      margin: 0 0 var(--ly-space-5);
      overflow-wrap: anywhere;
      white-space: pre-wrap;
    }
  `,
})
export class MailPage {
  readonly mailId = input.required<string>();
  protected readonly mail = inject(Api).resource(readMail, () => ({ params: { id: this.mailId() } }));
}
