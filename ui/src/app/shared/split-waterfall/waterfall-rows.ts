import type { LayerResult } from '@leanyear/contract/runs';

export type PremiumSplit = LayerResult['split'];

export interface WaterfallRow {
  readonly key: keyof PremiumSplit;
  readonly label: string;
  /** What the amount is, for those who ask. */
  readonly why: string;
  readonly kind: 'step' | 'total';
  readonly amount: number;
  /** The bar's ends as shares of the widest reach, 0 to 1. */
  readonly from: number;
  readonly to: number;
}

interface Line {
  readonly key: keyof PremiumSplit;
  readonly label: string;
  readonly why: string;
  readonly kind: 'step' | 'total';
}

const LINES: readonly Line[] = [
  {
    key: 'risklessLoss',
    kind: 'step',
    label: 'Expected loss, discounted',
    why: 'What the losses cost on average, at the riskless rate.',
  },
  {
    key: 'leanLoad',
    kind: 'step',
    label: 'Load for lean years',
    why: 'Capital strain: it pays when the house can least afford it.',
  },
  { key: 'lossAdjustment', kind: 'step', label: 'Loss adjustment', why: 'Expense of settling the losses.' },
  {
    key: 'fixedExpense',
    kind: 'step',
    label: 'Fixed expense',
    why: 'Borne by the contract whatever the line.',
  },
  {
    key: 'brokerageAndExpense',
    kind: 'step',
    label: 'Brokerage, taxes, expense',
    why: 'Shares of the premium that the house does not keep.',
  },
  {
    key: 'reinstatementValue',
    kind: 'step',
    label: 'Reinstatement premiums',
    why: 'Worth of what is paid again after losses.',
  },
  {
    key: 'marginalPremium',
    kind: 'total',
    label: 'Marginal premium',
    why: 'For a line so small that the house does not feel it.',
  },
  {
    key: 'lineSizeLoad',
    kind: 'step',
    label: 'Load for the line’s size',
    why: 'What the written line itself adds to the lean years.',
  },
  {
    key: 'walkAwayPremium',
    kind: 'total',
    label: 'Walk-away premium',
    why: 'Below it the house is better off without the contract.',
  },
  { key: 'margin', kind: 'step', label: 'Target margin', why: 'What the house wants above walking away.' },
  {
    key: 'minimumTopUp',
    kind: 'step',
    label: 'Minimum rate on line',
    why: 'What the minimum adds where it binds.',
  },
  { key: 'technicalPremium', kind: 'total', label: 'Technical premium', why: 'The price to quote from.' },
];

/** The premium from its first part to its last; each step's bar begins where the one before ended. */
export function waterfallRows(split: PremiumSplit): readonly WaterfallRow[] {
  let reached = 0;
  const spans = LINES.map((line) => {
    const amount = split[line.key];
    const from = line.kind === 'total' ? 0 : reached;
    reached = line.kind === 'total' ? amount : reached + amount;
    return { ...line, amount, low: Math.min(from, reached), high: Math.max(from, reached) };
  });
  const left = Math.min(0, ...spans.map((span) => span.low));
  const width = Math.max(...spans.map((span) => span.high)) - left || 1;
  return spans.map(({ low, high, ...row }) => ({
    ...row,
    from: (low - left) / width,
    to: (high - left) / width,
  }));
}
