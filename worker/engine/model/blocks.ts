/** Recoveries of one layer in one block: one entry an occurrence that reaches the layer, in order of state and day. */
export interface LayerHits {
  /** State within the block. */
  readonly state: Uint16Array;
  /** Event, counted through all catalogues of the run. */
  readonly event: Uint32Array;
  /** Occurrence recovery before annual terms, for 100%, contract currency. */
  readonly recovery: Float64Array;
}

/** What one block of states contributes. Owns nothing shared, so it can move between threads. */
export interface BlockResult {
  readonly index: number;
  readonly states: number;
  /** The book's catastrophe loss in each state, net of reinstatement premiums, house currency. */
  readonly bookLoss: Float64Array;
  /** Payoff Z of each layer in each state, for 100%, contract currency. */
  readonly payoffs: readonly Float64Array[];
  /** ΣY of each layer before annual terms: its sum and sum of squares over the block's states. */
  readonly recoverySums: Float64Array;
  readonly recoverySquares: Float64Array;
  /** Largest and summed ground-up loss of the programme in each state, contract currency. */
  readonly occurrenceLoss: Float64Array;
  readonly aggregateLoss: Float64Array;
  readonly hits: readonly LayerHits[];
}
