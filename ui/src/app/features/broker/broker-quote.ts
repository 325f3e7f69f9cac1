import { ChangeDetectionStrategy, Component, inject, input, signal } from '@angular/core';
import { declineAsBroker, orderAsBroker, readBrokerQuote, type BrokerQuote } from '@leanyear/contract/broker';
import { firstValueFrom, type Observable } from 'rxjs';
import { Api } from '../../core/api';
import { Notices } from '../../core/notices';
import { asProblem } from '../../core/problem';
import { StatePanel } from '../../shared/state-panel/state-panel';
import { Quotation, type Order } from './quotation';

/** A quotation for somebody signed in at the broker's firm. */
@Component({
  selector: 'ly-broker-quote',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Quotation, StatePanel],
  template: `
    @if (quote.hasValue()) {
      <ly-quotation [quote]="quote.value()" [busy]="busy()" [refusal]="refusal()" (ordered)="order($event)" (declined)="decline($event)" />
    } @else {
      <ly-state-panel [of]="quote" (again)="quote.reload()" />
    }
  `,
})
export class BrokerQuotePage {
  private readonly api = inject(Api);
  private readonly notices = inject(Notices);
  readonly quoteId = input.required<string>();
  protected readonly quote = this.api.resource(readBrokerQuote, () => ({ params: { id: this.quoteId() } }));
  protected readonly busy = signal(false);
  protected readonly refusal = signal<readonly string[]>([]);

  protected order(order: Order): Promise<void> {
    const body = { layers: [...order.layers], note: order.note };
    return this.answer(this.api.send(orderAsBroker, { params: { id: this.quoteId() }, body }), 'Your firm order is in. The underwriter is told by mail.');
  }

  protected decline(note: string): Promise<void> {
    return this.answer(this.api.send(declineAsBroker, { params: { id: this.quoteId() }, body: { note } }), 'Declined. The underwriter is told by mail.');
  }

  private async answer(call: Observable<BrokerQuote>, done: string): Promise<void> {
    this.busy.set(true);
    this.refusal.set([]);
    try {
      this.quote.set(await firstValueFrom(call));
      this.notices.done(done);
    } catch (error) {
      this.refusal.set(asProblem(error).words);
    } finally {
      this.busy.set(false);
    }
  }
}
