import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { FormControl, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { declineByLink, orderByLink, readLink, requestLinkCode, type BrokerQuote } from '@leanyear/contract/broker';
import { firstValueFrom, type Observable } from 'rxjs';
import { Api } from '../../core/api';
import { asProblem } from '../../core/problem';
import { Mark } from '../../shared/mark/mark';
import { StatePanel } from '../../shared/state-panel/state-panel';
import { Quotation, type Order } from './quotation';

/** The page behind a signed link: it shows, and acts only with the code that was mailed to the named contact. */
@Component({
  selector: 'ly-link',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Mark, MatButtonModule, MatFormFieldModule, MatInputModule, Quotation, ReactiveFormsModule, StatePanel],
  template: `
    <main class="outside">
      <ly-mark />
      @if (quote.hasValue()) {
        @if (done()) {
          <p role="status">{{ done() }}</p>
        }
        <ly-quotation [quote]="quote.value()" [busy]="busy()" [refusal]="refusal()" (ordered)="order($event)" (declined)="decline($event)">
          <div class="row">
            <button matButton="outlined" type="button" [disabled]="busy()" (click)="requestCode()">Mail me a code</button>
            <mat-form-field>
              <mat-label>Code from the mail</mat-label>
              <input matInput inputmode="numeric" autocomplete="one-time-code" maxlength="6" [formControl]="code" />
              <mat-hint>{{ sentTo() ? 'Sent to ' + sentTo() : 'Answers need a code that we mail to ' + quote.value().contact.name }}</mat-hint>
              <mat-error>Six digits, as in the mail.</mat-error>
            </mat-form-field>
          </div>
        </ly-quotation>
      } @else if (closed(); as words) {
        <ly-state-panel kind="missing" title="This link is closed" [detail]="words" />
      } @else {
        <ly-state-panel [of]="quote" (again)="quote.reload()" />
      }
    </main>
  `,
  styles: `
    .outside {
      display: grid;
      gap: var(--ly-space-5);
      grid-template-columns: minmax(0, 1fr);
      margin-inline: auto;
      max-width: 76rem;
      padding: var(--ly-space-5);
    }
  `,
})
export class Link {
  private readonly api = inject(Api);
  readonly token = input.required<string>();
  protected readonly quote = this.api.resource(readLink, () => ({ params: { token: this.token() } }));
  /** A withdrawn or expired link says so in the server's words. */
  protected readonly closed = computed(() => {
    const error = this.quote.error();
    if (error === undefined) return '';
    const problem = asProblem(error);
    return problem.status === 409 ? problem.words.join(' ') : '';
  });
  protected readonly code = new FormControl('', { nonNullable: true, validators: [Validators.required, Validators.pattern(/^\d{6}$/)] });
  protected readonly sentTo = signal('');
  protected readonly busy = signal(false);
  protected readonly done = signal('');
  protected readonly refusal = signal<readonly string[]>([]);

  protected async requestCode(): Promise<void> {
    this.refusal.set([]);
    try {
      const { sentTo } = await firstValueFrom(this.api.send(requestLinkCode, { params: { token: this.token() } }));
      this.sentTo.set(sentTo);
    } catch (error) {
      this.refusal.set(asProblem(error).words);
    }
  }

  protected async order(order: Order): Promise<void> {
    if (!this.coded()) return;
    const body = { layers: [...order.layers], note: order.note, code: this.code.value };
    await this.answer(this.api.send(orderByLink, { params: { token: this.token() }, body }), 'Your firm order is in. The underwriter is told by mail.');
  }

  protected async decline(note: string): Promise<void> {
    if (!this.coded()) return;
    await this.answer(this.api.send(declineByLink, { params: { token: this.token() }, body: { note, code: this.code.value } }), 'Declined. The underwriter is told by mail.');
  }

  private coded(): boolean {
    this.code.markAsTouched();
    if (this.code.invalid) this.refusal.set(['Ask for a code and type it in first.']);
    return this.code.valid;
  }

  private async answer(call: Observable<BrokerQuote>, done: string): Promise<void> {
    this.busy.set(true);
    this.refusal.set([]);
    try {
      this.quote.set(await firstValueFrom(call));
      this.done.set(done);
    } catch (error) {
      this.refusal.set(asProblem(error).words);
    } finally {
      this.busy.set(false);
    }
  }
}
