export { valueBlock } from './layers/block';
export { joinBlocks, type LayerValuation, type Valuation } from './join';
export type { BlockResult } from './model/blocks';
export * from './model/inputs';
export { prepare, type Prepared } from './model/prepare';
