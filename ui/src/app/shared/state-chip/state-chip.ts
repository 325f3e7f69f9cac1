import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { Icon } from '../icon/icon';
import { LOOKS, type AnyState } from './looks';

/** The state of a thing, in a word, an icon and a tone. */
@Component({
  selector: 'ly-state-chip',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Icon],
  template: `<ly-icon [name]="look().icon" /><span>{{ label() || state() }}</span>`,
  host: { '[attr.data-tone]': 'look().tone' },
  styles: `
    :host {
      display: inline-flex;
      align-items: center;
      gap: 0.3rem;
      padding: 0.05rem 0.5rem 0.05rem 0.35rem;
      border: 1px solid var(--ly-rule-strong);
      border-radius: var(--ly-radius);
      font-size: 0.8125rem;
      font-weight: 500;
      line-height: 1.35rem;
      white-space: nowrap;
    }

    ly-icon {
      font-size: 1rem;
    }

    :host([data-tone='quiet']) {
      color: var(--ly-ink-soft);
      border-color: var(--ly-rule);
    }

    :host([data-tone='waiting']) {
      background: var(--ly-wheat-wash);
      border-color: var(--ly-wheat);
    }

    :host([data-tone='good']) {
      color: var(--ly-reed);
      border-color: currentColor;
    }

    :host([data-tone='settled']) {
      background: var(--ly-reed);
      border-color: var(--ly-reed);
      color: var(--ly-sheet);
    }

    :host([data-tone='fault']) {
      background: var(--ly-fault-wash);
      border-color: var(--ly-fault);
    }
  `,
})
export class StateChip {
  readonly state = input.required<AnyState>();
  /** Other words for the state, where the page has better ones. */
  readonly label = input('');
  protected readonly look = computed(() => LOOKS[this.state()]);
}
