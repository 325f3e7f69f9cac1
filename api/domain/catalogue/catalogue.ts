import type { Reason } from '../shared/errors';
import type { Transaction } from '../shared/transaction';
import type { CatalogueState } from '../vocabulary';
import type { CatalogueFileEvent } from './catalogue-file';

export interface CatalogueVersionRecord {
  readonly id: string;
  readonly catalogueId: string;
  readonly number: number;
  readonly state: CatalogueState;
  readonly uploadedById: string;
}

export interface NewCatalogueVersion {
  readonly fileName: string;
  readonly contentHash: string;
  readonly events: readonly CatalogueFileEvent[];
  readonly uploadedBy: string;
}

/** An event as later files refer to it. */
export interface KnownEvent {
  /** The event's number in its catalogue, the same in all versions. */
  readonly eventNo: number;
  readonly ratePerYear: number;
  readonly peril: string;
  readonly region: string;
}

export interface ReleasedCatalogue {
  readonly versionId: string;
  readonly number: number;
  readonly name: string;
  readonly events: ReadonlyMap<string, KnownEvent>;
}

export interface Catalogues {
  /** @throws InvalidInput where the name is taken */
  create(transaction: Transaction, catalogue: { name: string; description: string; lineage: string }): Promise<{ id: string }>;
  /** Locks the catalogue, so that versions are numbered and released one after the other. @throws NotFound */
  lock(transaction: Transaction, catalogueId: string): Promise<void>;
  /** The newest version whatever its state, with the hash of its file. */
  newestVersion(transaction: Transaction, catalogueId: string): Promise<(CatalogueVersionRecord & { contentHash: string }) | null>;
  /** Stores a draft with its events; names that the catalogue knows keep their numbers. */
  addVersion(transaction: Transaction, catalogueId: string, version: NewCatalogueVersion): Promise<{ id: string; number: number }>;
  versionById(transaction: Transaction, versionId: string): Promise<CatalogueVersionRecord | null>;
  releasedVersionId(transaction: Transaction, catalogueId: string): Promise<string | null>;
  setState(transaction: Transaction, versionId: string, state: CatalogueState, releasedBy: string | null): Promise<void>;
  /** The released version with its events, or null where none is released. @throws NotFound where there is no such catalogue */
  released(catalogueId: string): Promise<ReleasedCatalogue | null>;
}

export type CatalogueMove = 'release' | 'withdraw';

export const CATALOGUE_MOVES: Readonly<Record<CatalogueMove, { readonly from: readonly CatalogueState[]; readonly to: CatalogueState }>> = {
  release: { from: ['draft'], to: 'released' },
  withdraw: { from: ['draft', 'released'], to: 'withdrawn' },
};

/** Why a move is not open to this person now; every reason at once. */
export function refusals(
  move: CatalogueMove,
  version: CatalogueVersionRecord,
  actorId: string,
  rules: { readonly fourEyes: boolean },
): Reason[] {
  const { from } = CATALOGUE_MOVES[move];
  const reasons: Reason[] = [];
  if (!from.includes(version.state)) {
    reasons.push({ code: 'state', message: `Version ${version.number} is ${version.state}; only one that is ${from.join(' or ')} can be ${CATALOGUE_MOVES[move].to}.` });
  }
  if (move === 'release' && rules.fourEyes && version.uploadedById === actorId) {
    reasons.push({ code: 'four eyes', message: 'Who uploaded a version cannot be the one to release it: ask another actuary.' });
  }
  return reasons;
}
