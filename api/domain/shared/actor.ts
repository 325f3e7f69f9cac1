import type { Permission, Role } from '../vocabulary';

/** Who is asking, as established by the session, the bearer token or the signed link. */
export interface Actor {
  readonly personId: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
  /** Set for brokers only. */
  readonly firmId: string | null;
  readonly sessionId: string;
  readonly permissions: readonly Permission[];
}
