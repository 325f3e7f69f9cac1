import type { NewQuoteRow } from '../../domain/quote/ports';
import type { RunUnderQuote } from '../../domain/quote/quote';
import { auditMove } from '../../domain/quote/audit-move';
import type { Actor } from '../../domain/shared/actor';
import { ChangedMeanwhile, InvalidInput, NotFound, Refused } from '../../domain/shared/errors';
import type { Transaction } from '../../domain/shared/transaction';
import { lockForMove, type QuoteDeps } from './deps';
import type { QuoteKind } from '../../domain/vocabulary';

export interface DraftInput {
  readonly runId: string;
  readonly kind: QuoteKind;
  readonly validUntil: string;
  readonly layers: readonly { readonly key: string; readonly premium: string }[];
  readonly note: string;
}

/** The run may carry a new quote, and there is one premium for each of its layers. */
async function runFor(deps: QuoteDeps, transaction: Transaction, programmeId: string, input: DraftInput): Promise<RunUnderQuote> {
  const run = await deps.quotes.run(transaction, input.runId);
  if (run === null || run.programmeId !== programmeId) throw new InvalidInput([{ path: 'runId', message: 'is not a run of this programme' }]);
  const reasons = [];
  if (!run.succeeded) reasons.push({ code: 'run', message: 'The run has no result to quote on.' });
  if (run.flagged) reasons.push({ code: 'self-check', message: 'The run is more than four standard errors from its exact check: it cannot be quoted.' });
  if (run.standing !== 'current') reasons.push({ code: run.standing, message: `The run is ${run.standing}: ${run.moved.join('; ')}. Price the programme again first.` });
  if (reasons.length > 0) throw new Refused(reasons);
  const errors: { path: string; message: string }[] = [];
  for (const layer of run.terms.layers) {
    if (!input.layers.some(({ key }) => key === layer.key)) errors.push({ path: 'layers', message: `needs a premium for ${layer.name}` });
  }
  input.layers.forEach(({ key }, i) => {
    if (!run.terms.layers.some((layer) => layer.key === key)) errors.push({ path: `layers.${i}.key`, message: 'is not a layer of the run' });
    if (input.layers.findIndex((other) => other.key === key) !== i) errors.push({ path: `layers.${i}.key`, message: 'has a premium already' });
  });
  if (input.validUntil < deps.today()) errors.push({ path: 'validUntil', message: 'must not have passed' });
  if (errors.length > 0) throw new InvalidInput(errors);
  return run;
}

/** Drafts a quote; its terms are those that the run froze. */
export async function draftQuote(deps: QuoteDeps, actor: Actor, programmeId: string, input: DraftInput): Promise<string> {
  return deps.unitOfWork.run(async (transaction) => {
    const run = await runFor(deps, transaction, programmeId, input);
    const row: NewQuoteRow = {
      familyId: null,
      programmeId,
      kind: input.kind,
      runId: input.runId,
      terms: run.terms,
      validUntil: input.validUntil,
      premiums: input.layers,
      note: input.note,
      authorId: actor.personId,
    };
    const id = await deps.quotes.create(transaction, row);
    await deps.audit.append(transaction, { actorId: actor.personId, actor: actor.name, action: 'quote draft', subject: 'quote', subjectId: id, from: null, to: 'draft' });
    return id;
  });
}

export async function changeDraft(deps: QuoteDeps, actor: Actor, id: string, version: number, input: DraftInput): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await deps.quotes.lock(transaction, id);
    if (quote === null) throw new NotFound('quote');
    if (quote.version !== version) throw new ChangedMeanwhile('quote');
    if (quote.state !== 'draft') throw new Refused([{ code: 'state', message: `A quote that is ${quote.state} is frozen: only a draft can be changed.` }]);
    const run = await runFor(deps, transaction, quote.programmeId, input);
    await deps.quotes.changeDraft(transaction, quote, { ...input, premiums: input.layers, terms: run.terms });
    await auditMove(deps, transaction, actor, quote, 'change', 'draft', null);
  });
}

/** Supersedes an issued quote by a draft of the next version; what the old one held and opened is given back and closed. */
export async function reviseQuote(deps: QuoteDeps, actor: Actor, id: string, note: string): Promise<string> {
  return deps.unitOfWork.run(async (transaction) => {
    const quote = await lockForMove(deps, transaction, id, 'revise', actor);
    await deps.quotes.move(transaction, quote, 'superseded');
    await deps.zones.release(transaction, quote.id);
    await deps.links.revokeAll(transaction, quote.id);
    await auditMove(deps, transaction, actor, quote, 'revise', 'superseded', note);
    const next = await deps.quotes.create(transaction, {
      familyId: quote.familyId,
      programmeId: quote.programmeId,
      kind: quote.kind,
      runId: quote.run.id,
      terms: quote.terms,
      validUntil: quote.validUntil,
      premiums: quote.premiums,
      note: quote.note,
      authorId: actor.personId,
    });
    // With the broker it was not priced again; back in the house it is.
    if (quote.run.standing === 'overtaken') await deps.outbox.put(transaction, 'book.moved', String(await deps.book.version(transaction)));
    await deps.audit.append(transaction, { actorId: actor.personId, actor: actor.name, action: 'quote draft', subject: 'quote', subjectId: next, from: null, to: 'draft', note: `revises ${quote.reference}, version ${quote.number}` });
    return next;
  });
}
