import type { Session } from '@leanyear/contract/session';
import { PERMISSIONS_OF, type Role } from '@leanyear/vocabulary';

/** Somebody of a role, as the server names them. */
export function sessionOf(role: Role): Session {
  return {
    person: {
      id: '7b0f4a52-3f0c-4a8e-9a53-0d7a6f0c1e01',
      name: 'Marit Holm',
      email: 'marit@leanyear.example',
      role,
      firm: null,
    },
    permissions: [...PERMISSIONS_OF[role]],
  };
}
