import type { BlockResult, Valuation, ValuationInputs } from '../engine';

/** What the pool asks of a thread. */
export type Ask =
  | { readonly kind: 'prepare'; readonly inputs: ValuationInputs }
  | { readonly kind: 'block'; readonly index: number }
  | { readonly kind: 'join'; readonly blocks: readonly BlockResult[] };

/** What a thread answers; one answer an ask, in order. */
export type Answer =
  | { readonly kind: 'prepared'; readonly blocks: number }
  | { readonly kind: 'block'; readonly block: BlockResult }
  | { readonly kind: 'joined'; readonly valuation: Valuation }
  /** The inputs cannot be priced: words for a person. */
  | { readonly kind: 'refused'; readonly words: string }
  | { readonly kind: 'broken'; readonly stack: string };

/** Memory of a block, to be handed to another thread instead of copied. */
export function buffersOf(block: BlockResult): ArrayBuffer[] {
  const arrays = [
    block.bookLoss,
    ...block.payoffs,
    block.recoverySums,
    block.recoverySquares,
    block.occurrenceLoss,
    block.aggregateLoss,
    ...block.hits.flatMap((hits) => [hits.state, hits.event, hits.recovery]),
  ];
  return arrays.map((array) => array.buffer as ArrayBuffer);
}
