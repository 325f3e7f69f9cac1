import { enforceAuthority } from '../../domain/authority/authority';
import { auditMove } from '../../domain/quote/audit-move';
import { authorityOver, refer } from '../../domain/quote/refer';
import { authorityAgainst } from '../../domain/quote/rules';
import type { QuoteRecord } from '../../domain/quote/quote';
import type { Actor } from '../../domain/shared/actor';
import type { Transaction } from '../../domain/shared/transaction';
import { lockForMove, type QuoteDeps } from './deps';

/** Submits a draft: approved within the submitter's own authority, otherwise referred to the seniors. */
export async function submitQuote(deps: QuoteDeps, actor: Actor, id: string, note: string): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await lockForMove(deps, transaction, id, 'submit', actor);
    const outcomes = await authorityOver(deps, quote, actor.personId, transaction);
    const failures = outcomes.filter(({ pass }) => !pass);
    if (failures.length > 0) {
      await refer(deps, transaction, quote, actor, failures, note);
      return;
    }
    const approval = enforceAuthority(quote, outcomes, actor.personId);
    await deps.quotes.approve(transaction, quote, approval, { submittedBy: actor.personId, decidedBy: actor.personId, decisionNote: null });
    await auditMove(deps, transaction, actor, quote, 'submit', 'approved', note);
  });
}

async function tellSubmitter(deps: QuoteDeps, transaction: Transaction, quote: QuoteRecord, actor: Actor, outcome: 'cleared' | 'returned' | 'declined', note: string): Promise<void> {
  const reader = quote.submittedBy ?? quote.author;
  await deps.mails.put(transaction, {
    kind: 'referral outcome',
    to: { personId: reader.id },
    quoteId: quote.id,
    subject: `Referral ${outcome}: ${quote.reference}, version ${quote.number}`,
    model: { reference: quote.reference, number: quote.number, outcome, decidedBy: actor.name, note, quoteId: quote.id },
  });
}

/** Clears a referral within the senior's own bounds. */
export async function clearQuote(deps: QuoteDeps, actor: Actor, id: string, note: string): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const over = (quote: QuoteRecord) => authorityOver(deps, quote, actor.personId, transaction);
    const quote = await lockForMove(deps, transaction, id, 'clear', actor, async (one) => authorityAgainst('clear', one, await over(one)));
    const approval = enforceAuthority(quote, await over(quote), actor.personId);
    await deps.quotes.approve(transaction, quote, approval, { decidedBy: actor.personId, decisionNote: note || null });
    await auditMove(deps, transaction, actor, quote, 'clear', 'approved', note);
    await tellSubmitter(deps, transaction, quote, actor, 'cleared', note);
  });
}

async function decide(deps: QuoteDeps, actor: Actor, id: string, note: string, move: 'return' | 'decline'): Promise<void> {
  const to = move === 'return' ? 'draft' : 'declined';
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await lockForMove(deps, transaction, id, move, actor);
    await deps.quotes.move(transaction, quote, to, { decidedBy: actor.personId, decisionNote: note });
    await auditMove(deps, transaction, actor, quote, move, to, note);
    await tellSubmitter(deps, transaction, quote, actor, move === 'return' ? 'returned' : 'declined', note);
  });
}

export const returnQuote = (deps: QuoteDeps, actor: Actor, id: string, note: string): Promise<void> => decide(deps, actor, id, note, 'return');
export const declineQuote = (deps: QuoteDeps, actor: Actor, id: string, note: string): Promise<void> => decide(deps, actor, id, note, 'decline');
