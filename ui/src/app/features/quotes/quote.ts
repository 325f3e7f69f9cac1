import { ChangeDetectionStrategy, Component, effect, inject, input, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { Router, RouterLink } from '@angular/router';
import {
  bindQuote, clearQuote, declineQuote, issueQuote, readQuote, returnQuote, reviseQuote, submitQuote, withdrawQuote, type Quote,
} from '@leanyear/contract/quotes';
import type { QuoteMove } from '@leanyear/vocabulary';
import { firstValueFrom } from 'rxjs';
import { Api } from '../../core/api';
import { EventStream } from '../../core/event-stream';
import { Notices } from '../../core/notices';
import { asProblem } from '../../core/problem';
import { SessionStore } from '../../core/session';
import { DeskTitle } from '../../core/title';
import { Amount } from '../../shared/amount/amount';
import { DayPipe, MomentPipe, SharePipe } from '../../shared/format/pipes';
import { Icon } from '../../shared/icon/icon';
import { MovesBar, type ChosenMove } from '../../shared/moves-bar/moves-bar';
import { StateChip } from '../../shared/state-chip/state-chip';
import { StatePanel } from '../../shared/state-panel/state-panel';
import { EditQuote } from './edit-quote';

/** Route of each move that a person of the house makes. */
const ROUTE = {
  submit: submitQuote,
  clear: clearQuote,
  return: returnQuote,
  decline: declineQuote,
  issue: issueQuote,
  withdraw: withdrawQuote,
  revise: reviseQuote,
  bind: bindQuote,
} as const satisfies Partial<Record<QuoteMove, unknown>>;

const DONE: Partial<Record<QuoteMove, string>> = {
  clear: 'Cleared. The submitter is told by mail.',
  return: 'Returned with your note.',
  decline: 'Declined with your reason.',
  issue: 'Issued. The broker has it by mail.',
  withdraw: 'Withdrawn.',
  revise: 'A new version is drafted.',
  bind: 'Bound. The book has moved on.',
};

@Component({
  selector: 'ly-quote',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Amount, DayPipe, EditQuote, Icon, MatButtonModule, MomentPipe, MovesBar, RouterLink, SharePipe, StateChip, StatePanel],
  templateUrl: './quote.html',
  styleUrl: './quote.scss',
})
export class QuotePage {
  private readonly api = inject(Api);
  private readonly router = inject(Router);
  private readonly notices = inject(Notices);
  readonly quoteId = input.required<string>();
  protected readonly quote = this.api.resource(readQuote, () => ({ params: { id: this.quoteId() } }));
  protected readonly mayDraft = inject(SessionStore).may('quotes.draft');
  protected readonly busy = signal(false);
  protected readonly editing = signal(false);
  protected readonly refusal = signal<readonly string[]>([]);

  constructor() {
    const title = inject(DeskTitle);
    effect(() => {
      if (this.quote.hasValue()) title.name(this.quote.value().reference);
    });
    inject(EventStream)
      .on('quote', 'book', 'catalogue', 'run')
      .pipe(takeUntilDestroyed())
      .subscribe((told) => {
        if (told.topic === 'quote' && told.id !== this.quoteId()) return;
        if (!this.editing() && !this.busy()) this.quote.reload();
      });
  }

  protected async move({ move, note }: ChosenMove): Promise<void> {
    const spec = move in ROUTE ? ROUTE[move as keyof typeof ROUTE] : undefined;
    if (spec === undefined) return;
    this.busy.set(true);
    this.refusal.set([]);
    try {
      const quote = await firstValueFrom(this.api.send(spec, { params: { id: this.quoteId() }, body: { note } }));
      this.notices.done(move === 'submit' ? this.submitted(quote) : (DONE[move] ?? 'Done.'));
      if (quote.id === this.quoteId()) this.quote.set(quote);
      else await this.router.navigate(['/quotes', quote.id]);
    } catch (error) {
      this.refusal.set(asProblem(error).words);
      this.quote.reload();
    } finally {
      this.busy.set(false);
    }
  }

  private submitted(quote: Quote): string {
    return quote.state === 'approved' ? 'Approved: it is within your authority.' : 'Referred to the senior underwriters.';
  }

  protected edited(quote: Quote): void {
    this.quote.set(quote);
    this.editing.set(false);
  }
}
