import type { Zones } from '../../domain/capacity/capacity';
import type { MailOutbox } from '../../domain/mail/mail';
import type { QuoteLinks, Quotes } from '../../domain/quote/ports';
import type { AuditTrail } from '../../domain/shared/audit';
import type { Notice } from '../../domain/shared/stream';
import type { UnitOfWork } from '../../domain/shared/transaction';

export interface BrokerDeps {
  readonly quotes: Quotes;
  readonly links: QuoteLinks;
  readonly zones: Zones;
  readonly mails: MailOutbox;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
  readonly linkSecret: string;
  /** Today's date, YYYY-MM-DD, in UTC. */
  readonly today: () => string;
  readonly notify: (notice: Notice) => Promise<void>;
}
