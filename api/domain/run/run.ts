import type { ProgrammeTermsRecord } from '../programme/programme';
import type { Transaction } from '../shared/transaction';
import type { RunState } from '../vocabulary';

/** A version of a file that a run used. */
export interface UsedVersion {
  readonly id: string;
  /** The catalogue or loss table that it is a version of. */
  readonly ofId: string;
  readonly name: string;
  readonly number: number;
  readonly contentHash: string;
}

/** Everything that a run rests on beside its terms, as it was when it was started. */
export interface RunInputs {
  readonly catalogues: readonly UsedVersion[];
  readonly lossTables: readonly UsedVersion[];
  readonly bookLossTables: readonly UsedVersion[];
  readonly contractIds: readonly string[];
}

export interface NewRun {
  readonly programmeId: string;
  readonly programmeVersion: number;
  readonly terms: ProgrammeTermsRecord;
  readonly states: number;
  readonly basisId: string;
  readonly bookVersion: number;
  readonly inputs: RunInputs;
  readonly inputHash: string;
  readonly engineVersion: string;
  readonly startedBy: string;
  readonly idempotencyKey: string | null;
  readonly repricesQuoteId: string | null;
}

/** What a run would rest on now. */
export interface PresentInputs {
  readonly basis: { readonly id: string; readonly number: number; readonly terms: unknown; readonly states: number; readonly currencies: readonly string[] } | null;
  readonly bookVersion: number;
  readonly inputs: RunInputs;
  /** Catalogues without a released version, by name, that the programme or the book needs. */
  readonly unreleased: readonly string[];
  /** Currencies of tables and contracts. */
  readonly currencies: readonly string[];
}

export interface Runs {
  /** Gathers what a valuation of these terms would rest on, leaving the programme's own contracts out of the book. */
  present(transaction: Transaction, programmeId: string, terms: ProgrammeTermsRecord): Promise<PresentInputs>;
  /** @throws Refused where the person's key has made another run meanwhile */
  create(transaction: Transaction, run: NewRun): Promise<string>;
  /** The run that this person made with this key, if any. */
  byKey(personId: string, key: string): Promise<string | null>;
  /** Whether a re-pricing of this quote on this version of the book, or a later one, has been started, however it ended. */
  repriced(transaction: Transaction, quoteId: string, bookVersion: number): Promise<boolean>;
  /** The quote that a run re-prices, with the run's state; null where it re-prices none. */
  repricing(runId: string): Promise<{ quoteId: string; state: RunState } | null>;
  /** Whether a run values the same terms as another on a later version of the book. */
  supersedes(transaction: Transaction, runId: string, otherId: string): Promise<boolean>;
  /** Re-pricings that have succeeded, whose quotes are still in the house and rest on an older book. */
  unrested(): Promise<string[]>;
  /** Ends a queued run, asks a running one to end. Answers the state it has then; null when there is no such run. */
  cancel(transaction: Transaction, runId: string): Promise<{ from: RunState; to: RunState } | null>;
}

export interface Progress {
  readonly done: number;
  readonly total: number;
  readonly doing: string;
}

/** A worker's attempt at a run: only the holder of the current number may write. */
export interface Attempt {
  readonly runId: string;
  /** Fencing number. */
  readonly number: number;
}

/** The runs' rows as the worker sees them. */
export interface RunDesk {
  /**
   * Takes a run that nobody works on; null where it has ended or somebody does. A run whose workers died again and again
   * fails here, and a cancel whose worker has died is carried out.
   */
  begin(runId: string): Promise<Attempt | null>;
  /** Says that the attempt lives and how far it is, null: as far as was said last; answers what is asked of it. */
  beat(attempt: Attempt, progress: Progress | null): Promise<'go on' | 'cancel' | 'lost'>;
  /** Stores the result with the yearly payoffs and wakes what follows, in one transaction. False: the attempt was overtaken. */
  succeed(attempt: Attempt, result: { json: unknown; hash: string; series: readonly { name: string; values: Float64Array }[] }): Promise<boolean>;
  fail(attempt: Attempt, words: string): Promise<void>;
  /** False: the attempt was overtaken. */
  cancelled(attempt: Attempt): Promise<boolean>;
  /** Gives the run back to the queue after unexpected trouble. */
  release(attempt: Attempt): Promise<void>;
  /** Runs that wait without a wake, or whose worker has been silent for too long. */
  forsaken(): Promise<{ runId: string; attempt: number }[]>;
}

/** Blocks of a large run that are done: kept until it ends, so that no crash makes them be done again. */
export interface RunBlocks {
  /** Numbers of the blocks that are kept. */
  kept(runId: string): Promise<number[]>;
  read(runId: string): Promise<{ index: number; bytes: Buffer }[]>;
  /** Keeps a block; nothing where the attempt was overtaken or the block is there. */
  keep(attempt: Attempt, index: number, bytes: Uint8Array): Promise<void>;
}
