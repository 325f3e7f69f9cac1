/**
 * The words of the desk: the only list of roles, permissions, states, moves and units.
 * Safe in a browser; imports nothing. Server, database checks and screens all read it.
 */

export const ROLES = ['underwriter', 'senior underwriter', 'actuary', 'broker', 'administrator'] as const;
export type Role = (typeof ROLES)[number];

/** What a person may ask for. Object rules (own firm, not the submitter, four eyes) come on top of these. */
export const PERMISSIONS = [
  'audit.read',
  'basis.read',
  'book.read',
  'broker.answer',
  'broker.read',
  'catalogues.read',
  'catalogues.release',
  'catalogues.upload',
  'desk.read',
  'firms.read',
  'firms.write',
  'grants.first',
  'grants.read',
  'grants.write',
  'people.read',
  'people.write',
  'post-room.read',
  'quotes.bind',
  'quotes.draft',
  'quotes.issue',
  'quotes.read',
  'referrals.clear',
  'runs.read',
  'runs.start',
  'submissions.read',
  'submissions.write',
] as const;
export type Permission = (typeof PERMISSIONS)[number];

const UNDERWRITER: readonly Permission[] = [
  'basis.read',
  'book.read',
  'catalogues.read',
  'desk.read',
  'firms.read',
  'grants.read',
  'people.read',
  'post-room.read',
  'quotes.bind',
  'quotes.draft',
  'quotes.issue',
  'quotes.read',
  'runs.read',
  'runs.start',
  'submissions.read',
  'submissions.write',
];

export const PERMISSIONS_OF: Readonly<Record<Role, readonly Permission[]>> = {
  underwriter: UNDERWRITER,
  'senior underwriter': [...UNDERWRITER, 'referrals.clear', 'grants.write'],
  actuary: [
    'basis.read',
    'book.read',
    'catalogues.read',
    'catalogues.release',
    'catalogues.upload',
    'desk.read',
    'firms.read',
    'people.read',
    'post-room.read',
    'quotes.read',
    'runs.read',
    'submissions.read',
  ],
  broker: ['broker.answer', 'broker.read'],
  administrator: [
    'audit.read',
    'desk.read',
    'firms.read',
    'firms.write',
    'grants.first',
    'grants.read',
    'people.read',
    'people.write',
    'post-room.read',
  ],
};

export const CATALOGUE_STATES = ['draft', 'released', 'withdrawn'] as const;
export type CatalogueState = (typeof CATALOGUE_STATES)[number];

export const BASIS_STATES = ['draft', 'released', 'retired'] as const;
export type BasisState = (typeof BASIS_STATES)[number];

export const SUBMISSION_STATES = ['open', 'closed'] as const;
export type SubmissionState = (typeof SUBMISSION_STATES)[number];

export const RUN_STATES = ['queued', 'running', 'cancelling', 'cancelled', 'succeeded', 'failed'] as const;
export type RunState = (typeof RUN_STATES)[number];
/** Run states from which nothing follows. */
export const RUN_ENDED: readonly RunState[] = ['cancelled', 'succeeded', 'failed'];

/**
 * How a finished run stands to the present: `stale` when any input but the book has moved,
 * `overtaken` when only the book has.
 */
export const RUN_STANDINGS = ['current', 'overtaken', 'stale'] as const;
export type RunStanding = (typeof RUN_STANDINGS)[number];

export const QUOTE_STATES = [
  'draft',
  'referred',
  'approved',
  'declined',
  'issued',
  'ordered',
  'bound',
  'not taken up',
  'lapsed',
  'withdrawn',
  'superseded',
] as const;
export type QuoteState = (typeof QUOTE_STATES)[number];

export const QUOTE_KINDS = ['indication', 'firm'] as const;
export type QuoteKind = (typeof QUOTE_KINDS)[number];

export const QUOTE_MOVES = [
  'submit',
  'clear',
  'return',
  'decline',
  'issue',
  'withdraw',
  'revise',
  'order',
  'broker decline',
  'bind',
  'lapse',
] as const;
export type QuoteMove = (typeof QUOTE_MOVES)[number];

export const AUTHORITY_RULES = ['largest line', 'lowest adequacy', 'below walk-away'] as const;
export type AuthorityRule = (typeof AUTHORITY_RULES)[number];

export const MAIL_KINDS = [
  'quote issued',
  'quote bound',
  'order code',
  'referral waiting',
  'referral outcome',
  'broker answered',
] as const;
export type MailKind = (typeof MAIL_KINDS)[number];

export const MAIL_STATES = ['waiting', 'sent', 'failed'] as const;
export type MailState = (typeof MAIL_STATES)[number];

/** Topics of the event stream to the screens; each names what to read again, never carries it. */
export const STREAM_TOPICS = ['run', 'quote', 'catalogue', 'submission', 'book', 'mail'] as const;
export type StreamTopic = (typeof STREAM_TOPICS)[number];

/** The cautions that stand wherever a price is shown. */
export const CAUTIONS: readonly string[] = [
  'Decision support, not an actuarial opinion: the appointed actuary comes first.',
  'Local regulation, licence and sanctions rules come before any price shown here.',
  'One treaty year, losses paid at its end; assets, reserves and attritional results are held fixed.',
  'Catalogue and loss tables are taken as given: their own error is not in the standard error.',
];
