import { ChangeDetectionStrategy, Component, computed, input, output, type Resource } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { asProblem } from '../../core/problem';
import { Icon } from '../icon/icon';

export type StateKind = 'empty' | 'loading' | 'failed' | 'forbidden' | 'missing' | 'offline';

interface Words {
  readonly icon: string;
  readonly title: string;
  readonly detail: string;
}

const WORDS: Readonly<Record<StateKind, Words>> = {
  empty: { icon: 'inbox', title: 'Nothing here yet', detail: '' },
  loading: { icon: 'hourglass_top', title: 'Reading', detail: '' },
  failed: { icon: 'error', title: 'This could not be read', detail: '' },
  forbidden: {
    icon: 'lock',
    title: 'This is not open to you',
    detail: 'Your role does not include it. A senior or the administrator can say who has it.',
  },
  missing: {
    icon: 'search',
    title: 'There is nothing here',
    detail: 'It was never here, or it is not yours to see.',
  },
  offline: {
    icon: 'wifi_off',
    title: 'No connection',
    detail: 'The desk cannot be reached. Try again once you are connected.',
  },
};

function kindOf(status: number): StateKind {
  if (status === 0) return 'offline';
  if (status === 403) return 'forbidden';
  return status === 404 ? 'missing' : 'failed';
}

/**
 * What stands where content would: while it is read, when there is none, and when it failed. Give it the resource (`of`)
 * and it finds its own words, or give it a `kind`. What is projected stands below the words: what to do next.
 */
@Component({
  selector: 'ly-state-panel',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Icon, MatButtonModule],
  templateUrl: './state-panel.html',
  styleUrl: './state-panel.scss',
  host: { '[attr.data-kind]': 'state()' },
})
export class StatePanel {
  readonly of = input<Resource<unknown>>();
  readonly kind = input<StateKind>('empty');
  readonly icon = input('');
  readonly title = input('');
  readonly detail = input('');
  /** Asked to read again; a resource of the API also reloads through its owner. */
  readonly again = output();

  private readonly problem = computed(() => {
    const error = this.of()?.error();
    return error === undefined ? null : asProblem(error);
  });
  protected readonly state = computed<StateKind>(() => {
    const problem = this.problem();
    if (problem !== null) return kindOf(problem.status);
    return this.of()?.isLoading() === true ? 'loading' : this.kind();
  });
  protected readonly errorId = computed(() => this.problem()?.errorId ?? null);
  protected readonly words = computed<Words>(() => {
    const state = this.state();
    const words = WORDS[state];
    const problem = this.problem();
    return {
      icon: this.icon() || words.icon,
      title: (problem === null && this.title()) || words.title,
      detail:
        (problem === null ? this.detail() : state === 'failed' ? problem.message : words.detail) ||
        words.detail,
    };
  });
  protected readonly mayTryAgain = computed(() => this.state() === 'failed' || this.state() === 'offline');
}
