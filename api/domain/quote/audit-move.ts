import type { Actor } from '../shared/actor';
import type { AuditTrail } from '../shared/audit';
import type { Transaction } from '../shared/transaction';
import type { QuoteRecord } from './quote';

/** Who acts, as the audit trail names them. */
export type By = Pick<Actor, 'personId' | 'name'> | { readonly personId: null; readonly name: string };

export function auditMove(
  deps: { readonly audit: AuditTrail },
  transaction: Transaction,
  by: By,
  quote: Pick<QuoteRecord, 'id' | 'state'>,
  move: string,
  to: string,
  note: string | null,
): Promise<void> {
  return deps.audit.append(transaction, {
    actorId: by.personId,
    actor: by.name,
    action: `quote ${move}`,
    subject: 'quote',
    subjectId: quote.id,
    from: quote.state,
    to,
    note: note === '' ? null : note,
  });
}

