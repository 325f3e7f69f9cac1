import type { Transaction } from '../shared/transaction';

export interface LossTableRecord {
  readonly id: string;
  readonly catalogueId: string;
  readonly newest: { readonly number: number; readonly contentHash: string; readonly catalogueVersionId: string; readonly currency: string; readonly basisNote: string } | null;
}

export interface StoredLossRow {
  /** The event's number in its catalogue. */
  readonly eventNo: number;
  readonly meanLoss: number;
  readonly sd: number;
  readonly commonShare: number;
  readonly exposedValue: number | null;
}

export interface NewLossTableVersion {
  readonly catalogueVersionId: string;
  readonly currency: string;
  readonly basisNote: string;
  readonly fileName: string;
  readonly contentHash: string;
  /** Σ rate × mean, in the table's currency a year. */
  readonly yearlyMean: number;
  /** Perils and regions with a loss: the accumulation zones that the table can touch. */
  readonly footprint: readonly { readonly peril: string; readonly region: string }[];
  readonly uploadedBy: string;
  readonly rows: readonly StoredLossRow[];
}

export interface LossTables {
  byName(transaction: Transaction, submissionId: string, name: string): Promise<LossTableRecord | null>;
  create(transaction: Transaction, table: { submissionId: string | null; catalogueId: string; name: string; lineage: string }): Promise<{ id: string }>;
  addVersion(transaction: Transaction, lossTableId: string, version: NewLossTableVersion): Promise<{ id: string; number: number }>;
}
