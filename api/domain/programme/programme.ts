import type { Transaction } from '../shared/transaction';

/** Terms of one excess-of-loss layer, for 100%, in the programme's currency; amounts as decimal text. */
export interface LayerTermsRecord {
  readonly key: string;
  readonly name: string;
  readonly limit: string;
  readonly attachment: string;
  readonly annualDeductible: string;
  readonly reinstatements: readonly number[];
  readonly brokerage: number;
  readonly writtenLine: number;
}

export interface ProgrammeTermsRecord {
  readonly name: string;
  readonly currency: string;
  readonly inceptionOn: string;
  /** Loss table versions whose losses are summed. */
  readonly lossTableIds: readonly string[];
  readonly layers: readonly LayerTermsRecord[];
}

export interface ProgrammeRecord {
  readonly id: string;
  readonly submissionId: string;
  readonly terms: ProgrammeTermsRecord;
  readonly version: number;
}

/** A loss table version as a programme may name it. */
export interface UsableLossTable {
  readonly id: string;
  /** The table that it is a version of. */
  readonly tableId: string;
  readonly name: string;
}

export interface Programmes {
  create(transaction: Transaction, submissionId: string, terms: ProgrammeTermsRecord, by: string): Promise<ProgrammeRecord>;
  byId(id: string): Promise<ProgrammeRecord | null>;
  /** @throws NotFound, or ChangedMeanwhile where `version` is not the present one */
  update(transaction: Transaction, id: string, version: number, terms: ProgrammeTermsRecord, by: string): Promise<void>;
  /** Every version of every loss table of the submission. */
  usableLossTables(transaction: Transaction, submissionId: string): Promise<UsableLossTable[]>;
}

/** What is wrong with the loss tables that terms name: strangers, and one table counted twice. */
export function lossTableFaults(terms: ProgrammeTermsRecord, usable: readonly UsableLossTable[]): { path: string; message: string }[] {
  const seen = new Map<string, string>();
  return terms.lossTableIds.flatMap((id, index) => {
    const path = `lossTableIds.${index}`;
    const table = usable.find((candidate) => candidate.id === id);
    if (table === undefined) return [{ path, message: 'is not a loss table of this submission' }];
    if (seen.has(table.tableId)) return [{ path, message: `is ${table.name} again: its losses would count twice` }];
    seen.set(table.tableId, id);
    return [];
  });
}
