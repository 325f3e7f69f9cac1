import { evaluateAuthority, measuredLayers, type RuleOutcome } from '../authority/authority';
import type { Grants } from '../grant/grant';
import type { MailOutbox } from '../mail/mail';
import type { People } from '../person/person';
import type { AuditTrail } from '../shared/audit';
import type { Transaction } from '../shared/transaction';
import { auditMove, type By } from './audit-move';
import type { Quotes } from './ports';
import type { QuoteRecord } from './quote';

export interface AuthorityDeps {
  readonly grants: Grants;
  /** Today's date, YYYY-MM-DD, in UTC. */
  readonly today: () => string;
}

export interface ReferDeps {
  readonly quotes: Quotes;
  readonly people: People;
  readonly mails: MailOutbox;
  readonly audit: AuditTrail;
}

/** Every rule of a person's authority over a quote, today. */
export async function authorityOver(deps: AuthorityDeps, quote: QuoteRecord, personId: string, transaction?: Transaction): Promise<RuleOutcome[]> {
  return evaluateAuthority(measuredLayers(quote), await deps.grants.listOf(personId, transaction), deps.today());
}

/** Moves a quote to referred and writes to every senior who may decide on it. */
export async function refer(
  deps: ReferDeps,
  transaction: Transaction,
  quote: QuoteRecord,
  by: By,
  failures: readonly RuleOutcome[],
  note: string,
): Promise<void> {
  await deps.quotes.move(transaction, quote, 'referred', by.personId === null ? {} : { submittedBy: by.personId, decidedBy: null, decisionNote: null });
  await auditMove(deps, transaction, by, quote, by.personId === null ? 'referred again' : 'submit', 'referred', note || failures.map(({ message }) => message).join(' '));
  const people = await deps.people.list(transaction);
  const own = [by.personId ?? quote.submittedBy?.id, quote.author.id];
  const seniors = people.filter((p) => p.role === 'senior underwriter' && p.active && !own.includes(p.id));
  for (const senior of seniors) {
    await deps.mails.put(transaction, {
      kind: 'referral waiting',
      to: { personId: senior.id },
      quoteId: quote.id,
      subject: `Referral waiting: ${quote.reference}, version ${quote.number}`,
      model: {
        reference: quote.reference,
        number: quote.number,
        cedant: quote.cedant.name,
        programmeName: quote.terms.name,
        submittedBy: by.name,
        failures: failures.map(({ message }) => message),
        quoteId: quote.id,
      },
    });
  }
}

