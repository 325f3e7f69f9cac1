import type {
  BasisState,
  CatalogueState,
  MailState,
  QuoteKind,
  QuoteState,
  RunStanding,
  RunState,
  SubmissionState,
} from '@leanyear/vocabulary';

/** Said by icon and words first; the tone only repeats it. */
export type Tone = 'quiet' | 'waiting' | 'good' | 'settled' | 'fault';

export interface Look {
  readonly icon: string;
  readonly tone: Tone;
}

export type AnyState =
  QuoteState | QuoteKind | RunState | RunStanding | CatalogueState | BasisState | SubmissionState | MailState;

export const LOOKS: Readonly<Record<AnyState, Look>> = {
  draft: { icon: 'edit', tone: 'quiet' },
  referred: { icon: 'gavel', tone: 'waiting' },
  approved: { icon: 'task_alt', tone: 'good' },
  declined: { icon: 'block', tone: 'fault' },
  issued: { icon: 'send', tone: 'good' },
  ordered: { icon: 'assignment', tone: 'waiting' },
  bound: { icon: 'handshake', tone: 'settled' },
  'not taken up': { icon: 'thumb_down', tone: 'quiet' },
  lapsed: { icon: 'timer', tone: 'quiet' },
  withdrawn: { icon: 'undo', tone: 'quiet' },
  superseded: { icon: 'history', tone: 'quiet' },
  indication: { icon: 'chat', tone: 'quiet' },
  firm: { icon: 'lock', tone: 'settled' },
  queued: { icon: 'hourglass_empty', tone: 'quiet' },
  running: { icon: 'progress_activity', tone: 'waiting' },
  cancelling: { icon: 'stop_circle', tone: 'waiting' },
  cancelled: { icon: 'cancel', tone: 'quiet' },
  succeeded: { icon: 'check_circle', tone: 'good' },
  failed: { icon: 'error', tone: 'fault' },
  current: { icon: 'verified', tone: 'good' },
  overtaken: { icon: 'update', tone: 'waiting' },
  stale: { icon: 'history', tone: 'fault' },
  released: { icon: 'verified', tone: 'settled' },
  retired: { icon: 'archive', tone: 'quiet' },
  open: { icon: 'folder_open', tone: 'good' },
  closed: { icon: 'archive', tone: 'quiet' },
  waiting: { icon: 'schedule', tone: 'waiting' },
  sent: { icon: 'mark_email_read', tone: 'good' },
};
