import type { Permission } from '@leanyear/vocabulary';

export interface Place {
  readonly path: string;
  readonly label: string;
  readonly icon: string;
  readonly permission: Permission;
}

/** Where one can go, in the order of the work; each is shown to those who may. */
export const PLACES: readonly (readonly Place[])[] = [
  [
    { path: '/desk', label: 'Desk', icon: 'inbox', permission: 'desk.read' },
    { path: '/submissions', label: 'Submissions', icon: 'folder_open', permission: 'submissions.read' },
    { path: '/quotes', label: 'Quotes', icon: 'request_quote', permission: 'quotes.read' },
    { path: '/referrals', label: 'Referrals', icon: 'gavel', permission: 'referrals.clear' },
    { path: '/broker', label: 'Quotations', icon: 'request_quote', permission: 'broker.read' },
  ],
  [
    { path: '/book', label: 'Book', icon: 'menu_book', permission: 'book.read' },
    { path: '/basis', label: 'House basis', icon: 'balance', permission: 'basis.read' },
    { path: '/catalogues', label: 'Event catalogues', icon: 'storm', permission: 'catalogues.read' },
  ],
  [
    { path: '/post-room', label: 'Post room', icon: 'mail', permission: 'post-room.read' },
    { path: '/people', label: 'People', icon: 'groups', permission: 'people.read' },
    { path: '/audit', label: 'Audit trail', icon: 'policy', permission: 'audit.read' },
  ],
];
