import type { FrozenLayer } from '../quote/quote';
import type { Transaction } from '../shared/transaction';

export interface NewContract {
  readonly name: string;
  readonly cedantId: string;
  readonly brokerFirmId: string;
  readonly currency: string;
  readonly inceptionOn: string;
  readonly expiresOn: string;
  readonly quoteId: string;
  readonly programmeId: string;
  readonly lossTableIds: readonly string[];
  readonly layers: readonly { readonly terms: FrozenLayer; readonly signedLine: number; readonly premium: string }[];
}

export interface Book {
  version(transaction: Transaction): Promise<number>;
  /**
   * Enters a contract as the next version of the book; what it renews leaves in the same version. Versions are
   * consecutive: the head's row is locked.
   */
  enter(transaction: Transaction, contract: NewContract, cause: string): Promise<{ contractId: string; version: number }>;
}

/** The last day of cover of twelve months: the day before the next anniversary. */
export function twelveMonthsFrom(inceptionOn: string): string {
  const end = new Date(`${inceptionOn}T00:00:00Z`);
  end.setUTCFullYear(end.getUTCFullYear() + 1);
  end.setUTCDate(end.getUTCDate() - 1);
  return end.toISOString().slice(0, 10);
}
