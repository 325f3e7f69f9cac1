import type { Zones } from '../capacity/capacity';
import type { AuditTrail } from '../shared/audit';
import type { UnitOfWork } from '../shared/transaction';
import { auditMove } from './audit-move';
import type { Quotes } from './ports';

export interface LapseDeps {
  readonly quotes: Quotes;
  readonly zones: Zones;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
  readonly today: () => string;
}

/** Lets a quote lapse whose validity has passed; does nothing where it has moved on meanwhile. */
export async function lapseQuote(deps: LapseDeps, id: string): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await deps.quotes.lock(transaction, id);
    if (quote === null || quote.state !== 'issued' || quote.validUntil >= deps.today()) return;
    await deps.quotes.move(transaction, quote, 'lapsed');
    await deps.zones.release(transaction, quote.id);
    await auditMove(deps, transaction, { personId: null, name: 'system' }, quote, 'lapse', 'lapsed', null);
  });
}
