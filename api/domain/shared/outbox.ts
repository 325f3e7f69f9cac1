import type { Transaction } from './transaction';

/**
 * Wakes to be given once the transaction has committed. A wake carries an id, never data: the rows are the truth.
 * `run.start` run id · `run.ended` run id · `mail.send` mail id · `book.moved` book version number.
 */
export const OUTBOX_TOPICS = ['run.start', 'run.ended', 'mail.send', 'book.moved'] as const;
export type OutboxTopic = (typeof OUTBOX_TOPICS)[number];

export interface Outbox {
  put(transaction: Transaction, topic: OutboxTopic, subjectId: string): Promise<void>;
}
