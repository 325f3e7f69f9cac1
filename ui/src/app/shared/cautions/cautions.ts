import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { CAUTIONS } from '@leanyear/vocabulary';
import { Icon } from '../icon/icon';

/** What stands wherever a price is shown. Broker papers bring their own words through `list`. */
@Component({
  selector: 'ly-cautions',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Icon],
  template: `
    <ly-icon name="info" />
    <ul aria-label="Cautions">
      @for (caution of list(); track caution) {
        <li>{{ caution }}</li>
      }
    </ul>
  `,
  styles: `
    :host {
      display: flex;
      gap: var(--ly-space-3);
      padding: var(--ly-space-3) var(--ly-space-4);
      color: var(--ly-ink-soft);
      font-size: 0.8125rem;
      border: 1px solid var(--ly-rule);
      border-left: 3px solid var(--ly-wheat);
      border-radius: var(--ly-radius);
      background: var(--ly-sheet);
    }

    ul {
      display: flex;
      flex-wrap: wrap;
      gap: 0 var(--ly-space-4);
      margin: 0;
      padding: 0;
      list-style: none;
    }
  `,
})
export class Cautions {
  readonly list = input<readonly string[]>(CAUTIONS);
}
