import type { LossRow, LossTable, SubmissionSummary } from '../../contract/submissions';

export interface SubmissionReader {
  /** Newest first. */
  list(): Promise<SubmissionSummary[]>;
  byId(id: string): Promise<SubmissionSummary | null>;
  /** Every version of every table, newest first. */
  lossTables(submissionId: string): Promise<LossTable[]>;
  /** One version of a loss table; those of the opening book belong to no submission and are not found. */
  lossTable(versionId: string): Promise<LossTable | null>;
  /** In the file's order. */
  lossRows(versionId: string, page: { offset: number; limit: number }): Promise<{ items: LossRow[]; total: number }>;
}
