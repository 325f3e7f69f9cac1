import type { OutboxTopic } from '../domain/shared/outbox';

/** A wake: a topic and the id of a row, never data. Given twice it must do no harm, lost it is given again. */
export interface Wake {
  /** Of the wake itself: the same id twice is one job. */
  readonly id: string;
  readonly topic: OutboxTopic;
  readonly subjectId: string;
}

/** Does what a wake asks. Rejecting has it tried again after a while, a few times. */
export type WakeHandler = (subjectId: string) => Promise<void>;
export type WakeHandlers = Readonly<Record<OutboxTopic, WakeHandler>>;

export interface WakeQueue {
  /** Resolves once the queue has taken the wake over. */
  add(wake: Wake): Promise<void>;
  /** Rejects while the queue cannot serve. */
  check(): Promise<void>;
  /** Starts giving wakes to the handlers. Runs go one at a time, everything else side by side. */
  work(handlers: WakeHandlers, onTrouble: (error: unknown, wake: Pick<Wake, 'topic' | 'subjectId'>) => void): void;
  /** Takes no more and waits for what is under way. */
  close(): Promise<void>;
}

/** How often a wake is tried, and the wait before the second try; each later wait is twice the one before. */
export const TRIES: Readonly<Record<OutboxTopic, number>> = { 'run.start': 3, 'run.ended': 8, 'mail.send': 6, 'book.moved': 8 };
export const FIRST_WAIT_MILLISECONDS = 1000;
/** Wakes beside runs that are worked on at once. */
export const SIDE_BY_SIDE = 4;
