import { OUTBOX_TOPICS } from '../domain/shared/outbox';

/** What wakes are about: what the outbox asks for, and the parts of a large run, which the worker asks for itself. */
export const WAKE_TOPICS = [...OUTBOX_TOPICS, 'run.blocks', 'run.join'] as const;
export type WakeTopic = (typeof WAKE_TOPICS)[number];

/** A wake: a topic and the id of a row, never data. Given twice it must do no harm, lost it is given again. */
export interface Wake {
  /** Of the wake itself: the same id twice is one job. */
  readonly id: string;
  readonly topic: WakeTopic;
  readonly subjectId: string;
}

/** Does what a wake asks. Rejecting has it tried again after a while, a few times. */
export type WakeHandler = (subjectId: string) => Promise<void>;
export type WakeHandlers = Readonly<Record<WakeTopic, WakeHandler>>;

export interface WakeQueue {
  /** Resolves once the queue has taken the wake over. */
  add(wake: Wake): Promise<void>;
  /** Gives the children, and once all of them have been done or given up, their parent. All are taken over or none. */
  addFlow(parent: Wake, children: readonly Wake[]): Promise<void>;
  /** Rejects while the queue cannot serve. */
  check(): Promise<void>;
  /** Starts giving wakes to the handlers. Runs and their parts go one at a time, everything else side by side. */
  work(handlers: WakeHandlers, onTrouble: (error: unknown, wake: Pick<Wake, 'topic' | 'subjectId'>) => void): void;
  /** Takes no more and waits for what is under way. */
  close(): Promise<void>;
}

/** How often a wake is tried, and the wait before the second try; each later wait is twice the one before. */
export const TRIES: Readonly<Record<WakeTopic, number>> = {
  'run.start': 3,
  'run.blocks': 3,
  'run.join': 3,
  'run.ended': 8,
  'mail.send': 6,
  'book.moved': 8,
};
export const FIRST_WAIT_MILLISECONDS = 1000;
/** Runs have a lane of their own, so that a long one holds up no mail. */
export const laneOf = (topic: WakeTopic): 'runs' | 'acts' => (topic === 'run.start' || topic === 'run.blocks' || topic === 'run.join' ? 'runs' : 'acts');
/** Wakes beside runs that are worked on at once. */
export const SIDE_BY_SIDE = 4;
