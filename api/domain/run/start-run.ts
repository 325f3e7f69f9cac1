import { hashOf } from './canonical';
import type { NewRun, PresentInputs, Runs } from './run';
import type { ProgrammeTermsRecord } from '../programme/programme';
import { Refused, type Reason } from '../shared/errors';
import type { Transaction } from '../shared/transaction';

export interface WantedRun {
  readonly programmeId: string;
  readonly programmeVersion: number;
  readonly terms: ProgrammeTermsRecord;
  /** Size of the grid; the basis states the default. */
  readonly states: number | null;
  readonly startedBy: string;
  readonly idempotencyKey: string | null;
  readonly repricesQuoteId: string | null;
}

function whatIsMissing(present: PresentInputs): Reason[] {
  const reasons: Reason[] = present.unreleased.map((name) => ({
    code: 'catalogue',
    message: `The catalogue ${name} has no released version: an actuary releases one under Catalogues.`,
  }));
  if (present.basis === null) {
    reasons.push({ code: 'basis', message: 'No house basis is released: an actuary releases one before anything can be priced.' });
    return reasons;
  }
  const known = present.basis.currencies;
  for (const currency of present.currencies.filter((one) => !known.includes(one))) {
    reasons.push({ code: 'currency', message: `The released basis has no rate of exchange for ${currency}: an actuary adds it to the next basis.` });
  }
  return reasons;
}

/**
 * Writes a run and its wake: everything it will rest on is named and hashed now, so that the same inputs are recognised
 * and every later move of one of them is seen.
 * @throws Refused with all that is missing and what to do about it
 */
export async function startRun(runs: Runs, engineVersion: string, transaction: Transaction, wanted: WantedRun): Promise<string> {
  const present = await runs.present(transaction, wanted.programmeId, wanted.terms);
  const reasons = whatIsMissing(present);
  if (reasons.length > 0 || present.basis === null) throw new Refused(reasons);
  const states = wanted.states ?? present.basis.states;
  const { catalogues, lossTables, bookLossTables, contractIds } = present.inputs;
  const content = (used: typeof catalogues): string[][] => used.map(({ ofId, contentHash }) => [ofId, contentHash]);
  const run: NewRun = {
    programmeId: wanted.programmeId,
    programmeVersion: wanted.programmeVersion,
    terms: wanted.terms,
    states,
    basisId: present.basis.id,
    bookVersion: present.bookVersion,
    inputs: present.inputs,
    inputHash: hashOf({
      terms: wanted.terms,
      states,
      basis: present.basis.terms,
      book: { version: present.bookVersion, contractIds },
      catalogues: content(catalogues),
      lossTables: content(lossTables),
      bookLossTables: content(bookLossTables),
      engineVersion,
    }),
    engineVersion,
    startedBy: wanted.startedBy,
    idempotencyKey: wanted.idempotencyKey,
    repricesQuoteId: wanted.repricesQuoteId,
  };
  return runs.create(transaction, run);
}
