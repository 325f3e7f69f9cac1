/** Which losses of a year a layer counts, and how. */
export type LayerForm =
  /** Each occurrence over the attachment, up to the limit. */
  | { readonly kind: 'excess' }
  /**
   * The year's sum over the attachment, up to the limit: each occurrence counts from its threshold on, in full (a
   * franchise) or over it (a deductible), at most up to the cap.
   */
  | { readonly kind: 'aggregate'; readonly threshold: number; readonly counts: 'in full' | 'over it'; readonly cap: number | null }
  /** As excess, but only from the n-th occurrence on that reaches the qualifying threshold. */
  | { readonly kind: 'nth event'; readonly first: number; readonly qualifying: number };

/** An excess cover that inures to the layer's benefit: what it recovers is taken off each loss before the layer sees it. */
export interface InuringCover {
  readonly limit: number;
  readonly attachment: number;
  /** Most that it pays in a year; Infinity: no such bound. Consumed in order of day. */
  readonly annualLimit: number;
}

/** Terms of a layer for 100%, contract currency. Cover is losses-occurring for the twelve months from inception. */
export interface LayerTerms {
  readonly key: string;
  /** Excess of loss unless said. */
  readonly form?: LayerForm;
  readonly limit: number;
  /** Of the occurrence, or of the year's sum in an aggregate excess. */
  readonly attachment: number;
  readonly annualDeductible: number;
  /** Price of each reinstatement in order, as a share of the layer premium, pro rata as to amount. */
  readonly reinstatements: readonly number[];
  /** Price of each of unlimited reinstatements, 0 where free; then `reinstatements` is empty. */
  readonly unlimitedReinstatementsAt?: number;
  /** Reinstatement premium also pro rata as to time: by the days of the period still to run. */
  readonly reinstatedProRataTime?: boolean;
  /** Most that is paid in a year, for 100%, where less than limit × (reinstatements + 1). */
  readonly annualLimit?: number;
  /** Only events of these perils; all where left out. */
  readonly perils?: readonly string[];
  /** Only events of these regions; all where left out. */
  readonly regions?: readonly string[];
  /** Share of every loss that an inuring quota share leaves, above 0 to 1. */
  readonly quotaShareKept?: number;
  readonly inuringCovers?: readonly InuringCover[];
  /** Share of the layer that the cedant keeps: the line cannot exceed the rest. */
  readonly coParticipation?: number;
  /** Share of 100% that the house writes. */
  readonly line: number;
  /** Share of the layer premium. */
  readonly brokerage: number;
  /** Whether brokerage is also taken from reinstatement premiums; not unless the slip says so. */
  readonly brokerageOnReinstatements?: boolean;
}
