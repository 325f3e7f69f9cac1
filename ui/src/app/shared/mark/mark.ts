import { ChangeDetectionStrategy, Component } from '@angular/core';

/** The house's mark: years from lean to plentiful, and its name. */
@Component({
  selector: 'ly-mark',
  changeDetection: ChangeDetectionStrategy.OnPush,
  template: `
    <svg viewBox="0 0 24 24" width="24" height="24" aria-hidden="true">
      <path class="lean" d="M2.5 21v-4.2M6 21v-6.4M9.5 21v-5" />
      <path class="turn" d="M13 21V11" />
      <path class="plentiful" d="M16.2 21V8.2M19.4 21V4.8M22.4 21V2.6" />
    </svg>
    <span>Leanyear</span>
  `,
  styles: `
    :host {
      display: inline-flex;
      align-items: center;
      gap: 0.6rem;
      font-weight: 700;
      font-size: 1.0625rem;
      letter-spacing: -0.03em;
    }

    path {
      fill: none;
      stroke-width: 2.2;
      stroke-linecap: round;
    }

    .lean {
      stroke: var(--ly-ember);
    }

    .turn {
      stroke: var(--ly-wheat);
    }

    .plentiful {
      stroke: var(--ly-reed);
    }
  `,
})
export class Mark {}
