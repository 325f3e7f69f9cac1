import type { Transaction } from '../shared/transaction';
import type { SubmissionState } from '../vocabulary';

export interface NewSubmission {
  readonly cedantId: string;
  readonly brokerFirmId: string;
  readonly contactId: string;
  readonly treatyYear: number;
  readonly inceptionOn: string;
  readonly currency: string;
  readonly note: string;
  readonly ownerId: string;
}

export interface SubmissionChange {
  readonly contactId?: string;
  readonly inceptionOn?: string;
  readonly note?: string;
  readonly state?: SubmissionState;
}

export interface SubmissionRecord {
  readonly id: string;
  readonly reference: string;
  readonly state: SubmissionState;
}

export interface Submissions {
  /** @throws InvalidInput where cedant or contact are unknown, or the contact is another firm's */
  create(transaction: Transaction, submission: NewSubmission): Promise<SubmissionRecord>;
  /** @throws NotFound, ChangedMeanwhile, InvalidInput where the contact is not one of the submission's firm */
  update(transaction: Transaction, id: string, version: number, change: SubmissionChange): Promise<void>;
  /** Locks the submission, so that its loss tables are numbered one after the other. @throws NotFound */
  lock(transaction: Transaction, id: string): Promise<SubmissionRecord>;
  byId(id: string): Promise<SubmissionRecord | null>;
}
