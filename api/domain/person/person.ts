import type { Permission, Role } from '../vocabulary';
import { PERMISSIONS_OF } from '../vocabulary';
import type { Transaction } from '../shared/transaction';

export interface PersonRecord {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
  readonly firm: { readonly id: string; readonly name: string } | null;
  readonly active: boolean;
  readonly version: number;
}

export function permissionsOf(role: Role): readonly Permission[] {
  return PERMISSIONS_OF[role];
}

export interface People {
  list(transaction?: Transaction): Promise<PersonRecord[]>;
  byId(id: string): Promise<PersonRecord | null>;
  /** The account with its password's hash, active or not. */
  credentialsOf(email: string): Promise<{ person: PersonRecord; passwordHash: string } | null>;
  /** @throws InvalidInput where the e-mail is taken or the firm is unknown */
  create(
    transaction: Transaction,
    person: { name: string; email: string; role: Role; firmId: string | null; passwordHash: string },
  ): Promise<PersonRecord>;
  /** @throws ChangedMeanwhile where `version` is not the present one */
  update(transaction: Transaction, id: string, version: number, change: { name?: string; active?: boolean }): Promise<PersonRecord>;
  setPassword(transaction: Transaction, id: string, passwordHash: string): Promise<void>;
}

export interface Firms {
  list(): Promise<{ id: string; name: string; contacts: { id: string; name: string; email: string }[] }[]>;
  create(transaction: Transaction, name: string): Promise<{ id: string; name: string; contacts: [] }>;
  addContact(
    transaction: Transaction,
    firmId: string,
    contact: { name: string; email: string },
  ): Promise<{ id: string; name: string; email: string }>;
  cedants(): Promise<{ id: string; name: string; territory: string }[]>;
  createCedant(
    transaction: Transaction,
    cedant: { name: string; territory: string },
  ): Promise<{ id: string; name: string; territory: string }>;
}
