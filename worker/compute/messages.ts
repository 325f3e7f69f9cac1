import type { Found, SharedMemory, Task, Valuation, ValuationInputs } from '../engine';

/** Memory that a thread offers to all, or a size it needs. */
export interface Size {
  readonly rows: number;
  readonly tabledRows: number;
  readonly states: number;
  readonly blocks: number;
}

/** What the pool asks of a thread. */
export type Ask =
  | { readonly kind: 'prepare'; readonly inputs: ValuationInputs }
  | { readonly kind: 'share'; readonly memory: SharedMemory }
  /** Of the one thread that leads: the next wave of tasks, given what those of the last one found. */
  | { readonly kind: 'lead'; readonly found: readonly Found[] }
  | { readonly kind: 'do'; readonly task: Task }
  | { readonly kind: 'take'; readonly found: readonly Found[] }
  | { readonly kind: 'release' };

/** What a thread answers; one answer an ask, in order. */
export type Answer =
  | { readonly kind: 'prepared'; readonly size: Size }
  | { readonly kind: 'wave'; readonly tasks: readonly Task[] }
  | { readonly kind: 'valued'; readonly valuation: Valuation }
  | { readonly kind: 'found'; readonly found: Found }
  | { readonly kind: 'done' }
  /** The inputs cannot be priced: words for a person. */
  | { readonly kind: 'refused'; readonly words: string }
  | { readonly kind: 'broken'; readonly stack: string };

export type AnswerOf<K extends Answer['kind']> = Extract<Answer, { readonly kind: K }>;
