import { ChangeDetectionStrategy, Component, computed, inject, output } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { HttpContext } from '@angular/common/http';
import { demoAccounts } from '@leanyear/contract/session';
import type { ReplyOf } from '@leanyear/contract/route';
import { Api } from '../../core/api';
import { SIGN_IN } from '../../core/sign-in-context';

export type DemoAccount = ReplyOf<typeof demoAccounts>[number];

/** The demo's people, where the server runs a demo; nothing otherwise. Choosing one fills the form. */
@Component({
  selector: 'ly-demo-accounts',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MatButtonModule],
  template: `
    @if (list().length > 0) {
      <h2 id="demo-people">People of the demo</h2>
      <ul aria-labelledby="demo-people">
        @for (account of list(); track account.email) {
          <li>
            <button type="button" (click)="chosen.emit(account)">
              <span>{{ account.name }}</span>&ngsp;
              <span class="role">{{ account.role }}</span>
            </button>
          </li>
        }
      </ul>
    }
  `,
  styles: `
    h2 {
      margin-top: var(--ly-space-6);
      font-size: 0.8125rem;
      font-weight: 500;
      letter-spacing: 0;
      color: var(--ly-ink-soft);
    }

    ul {
      margin: var(--ly-space-2) 0 0;
      padding: 0;
      list-style: none;
      border-top: 1px solid var(--ly-rule);
    }

    li {
      border-bottom: 1px solid var(--ly-rule);
    }

    button {
      display: flex;
      justify-content: space-between;
      gap: var(--ly-space-3);
      width: 100%;
      min-height: 2.5rem;
      padding: var(--ly-space-2) var(--ly-space-2);
      border: 0;
      background: none;
      color: inherit;
      font: inherit;
      text-align: start;
      align-items: center;
      cursor: pointer;
    }

    button:hover {
      background: var(--ly-wheat-wash);
    }

    .role {
      color: var(--ly-ink-soft);
    }
  `,
})
export class DemoAccounts {
  readonly chosen = output<DemoAccount>();
  private readonly accounts = inject(Api).resource(demoAccounts, () => ({
    context: new HttpContext().set(SIGN_IN, 'none'),
  }));
  protected readonly list = computed(() => (this.accounts.hasValue() ? this.accounts.value() : []));
}
