import { failuresAsReasons, holdsNone, type RuleOutcome } from '../authority/authority';
import type { Actor } from '../shared/actor';
import type { Reason } from '../shared/errors';
import type { Permission, QuoteMove } from '../vocabulary';
import type { QuoteRecord } from './quote';
import { TRANSITIONS } from './transitions';

/** Permission that each move of a person of the house needs; moves of brokers and of the clock need none here. */
const PERMISSION: Partial<Record<QuoteMove, Permission>> = {
  submit: 'quotes.draft',
  clear: 'referrals.clear',
  return: 'referrals.clear',
  decline: 'referrals.clear',
  issue: 'quotes.issue',
  withdraw: 'quotes.draft',
  revise: 'quotes.draft',
  bind: 'quotes.bind',
};
const DECISIONS: readonly QuoteMove[] = ['clear', 'return', 'decline'];

export function staleness(quote: QuoteRecord): Reason[] {
  const { standing, moved, flagged, succeeded } = quote.run;
  const reasons: Reason[] = [];
  if (!succeeded) reasons.push({ code: 'run', message: 'The run under this quote has no result.' });
  if (flagged) reasons.push({ code: 'self-check', message: 'The run is more than four standard errors from its exact check: it cannot be quoted.' });
  if (standing === 'stale') reasons.push({ code: 'stale', message: `The price is stale: ${moved.join('; ')}. Price the programme again.` });
  if (standing === 'overtaken') {
    reasons.push({ code: 'overtaken', message: 'The book has moved since this was priced: it is being priced again on the new book. Try again in a moment.' });
  }
  return reasons;
}

function validity(quote: QuoteRecord, today: string): Reason[] {
  return quote.validUntil < today
    ? [{ code: 'validity', message: `The quote was valid until ${quote.validUntil}, which has passed.` }]
    : [];
}

/** What stands against a move now, all at once; authority is the next function, capacity is looked at where it is taken. */
export function reasonsAgainst(move: QuoteMove, quote: QuoteRecord, actor: Actor | null, today: string): Reason[] {
  const reasons: Reason[] = [];
  if (!TRANSITIONS[move].from.includes(quote.state)) {
    reasons.push({ code: 'state', message: `A quote that is ${quote.state} cannot take the step "${TRANSITIONS[move].label.toLowerCase()}".` });
    return reasons;
  }
  if (actor !== null && DECISIONS.includes(move) && (actor.personId === quote.submittedBy?.id || actor.personId === quote.author.id)) {
    reasons.push({ code: 'own referral', message: 'Nobody decides on a referral of their own.' });
  }
  if (move === 'submit' || move === 'clear' || move === 'issue') reasons.push(...staleness(quote), ...validity(quote, today));
  if (move === 'withdraw' && quote.state === 'issued' && quote.kind === 'firm') {
    reasons.push({ code: 'promise', message: 'A firm quote is a promise until its validity ends: revise it, or let it lapse.' });
  }
  if (move === 'order') reasons.push(...validity(quote, today));
  // A firm quote accepted in time is not refused for house reasons; an indication promised nothing. That the book has
  // moved refuses neither: with every contract it moves, and what is with a broker is not priced again.
  if (move === 'bind' && quote.kind === 'indication') reasons.push(...staleness(quote).filter(({ code }) => code !== 'overtaken'));
  if (move === 'lapse' && quote.validUntil >= today) reasons.push({ code: 'validity', message: 'The quote is still valid.' });
  return reasons;
}

/**
 * What the actor's own authority has against a move. Who clears must hold it over the quote, and who binds too; where a
 * senior has cleared this very quote, who binds needs a grant in force, whatever its bounds.
 */
export function authorityAgainst(move: QuoteMove, quote: QuoteRecord, outcomes: readonly RuleOutcome[]): Reason[] {
  if (move !== 'clear' && move !== 'bind') return [];
  const cleared = move === 'bind' && quote.decidedBy !== null && quote.decidedBy.id !== quote.submittedBy?.id;
  return cleared && !holdsNone(outcomes) ? [] : failuresAsReasons(outcomes);
}

export interface MoveOffer {
  readonly move: QuoteMove;
  readonly label: string;
  readonly allowed: boolean;
  readonly reasons: Reason[];
  readonly needsNote: boolean;
}

/**
 * The moves that could come next for a person of the house, with what stands against each.
 * @param authority every rule of the actor's own authority over the quote
 */
export function movesFor(quote: QuoteRecord, actor: Actor, authority: readonly RuleOutcome[], today: string): MoveOffer[] {
  return (Object.keys(TRANSITIONS) as QuoteMove[])
    .filter((move) => {
      const permission = PERMISSION[move];
      return permission !== undefined && actor.permissions.includes(permission) && TRANSITIONS[move].from.includes(quote.state);
    })
    .map((move) => {
      const reasons = [...reasonsAgainst(move, quote, actor, today), ...authorityAgainst(move, quote, authority)];
      const { label, needsNote } = TRANSITIONS[move];
      return { move, label, allowed: reasons.length === 0, reasons, needsNote };
    });
}
