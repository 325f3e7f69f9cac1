import type { QuoteMove, QuoteState } from '../vocabulary';

interface Transition {
  readonly from: readonly QuoteState[];
  readonly to: readonly QuoteState[];
  readonly label: string;
  /** Whether the person has to say why. */
  readonly needsNote: boolean;
}

/** Every way a quote moves. A state or move that is missing here does not compile; the spec looks for unreachable ones. */
export const TRANSITIONS: Readonly<Record<QuoteMove, Transition>> = {
  submit: { from: ['draft'], to: ['approved', 'referred'], label: 'Submit', needsNote: false },
  clear: { from: ['referred'], to: ['approved'], label: 'Clear', needsNote: false },
  return: { from: ['referred'], to: ['draft'], label: 'Return', needsNote: true },
  decline: { from: ['referred'], to: ['declined'], label: 'Decline', needsNote: true },
  issue: { from: ['approved'], to: ['issued'], label: 'Issue to broker', needsNote: false },
  withdraw: { from: ['draft', 'referred', 'approved', 'issued'], to: ['withdrawn'], label: 'Withdraw', needsNote: true },
  revise: { from: ['issued'], to: ['superseded'], label: 'Revise', needsNote: false },
  order: { from: ['issued'], to: ['ordered'], label: 'Firm order', needsNote: false },
  'broker decline': { from: ['issued'], to: ['not taken up'], label: 'Decline', needsNote: true },
  bind: { from: ['ordered'], to: ['bound'], label: 'Bind', needsNote: false },
  lapse: { from: ['issued'], to: ['lapsed'], label: 'Lapse', needsNote: false },
};

/** States in which the quote is still being worked on inside the house: the desk re-prices these itself. */
export const IN_THE_HOUSE: readonly QuoteState[] = ['draft', 'referred', 'approved'];
