import { BLOCK_STATES } from './inputs';

/** Occurrences of a contract's losses in one block, in order of state and day; arrays of `count` entries. */
export interface BlockLosses {
  readonly count: number;
  /** State within the block. */
  readonly state: Uint16Array;
  /** Event, counted through all catalogues of the run. */
  readonly event: Uint32Array;
  /** Days since inception. */
  readonly day: Float64Array;
  /** Ground-up loss, contract currency. */
  readonly loss: Float64Array;
}

/** What one block of states contributes: dense columns of the block's states, and the programme's losses that can count. */
export interface BlockResult {
  readonly index: number;
  readonly states: number;
  /** The book's catastrophe loss in each state, net of reinstatement premiums, house currency. */
  readonly bookLoss: Float64Array;
  /** Largest and summed ground-up loss of the programme in each state, contract currency. */
  readonly occurrenceLoss: Float64Array;
  readonly aggregateLoss: Float64Array;
  readonly losses: BlockLosses;
}

export function statesOfBlock(states: number, index: number): number {
  return Math.min(BLOCK_STATES, states - index * BLOCK_STATES);
}

const HEADER_BYTES = 16;
const DENSE_COLUMNS = 3;
const BYTES_AN_OCCURRENCE = 8 + 8 + 4 + 2;

/** Bytes of a block with so many states and occurrences, in one piece. */
function bytesOf(states: number, count: number): number {
  return HEADER_BYTES + 8 * DENSE_COLUMNS * states + BYTES_AN_OCCURRENCE * count;
}

/** A block laid over one piece of memory: number, states, occurrences; the dense columns; day, loss, event and state. */
export function blockIn(memory: ArrayBuffer | SharedArrayBuffer): BlockResult {
  const header = new Uint32Array(memory, 0, HEADER_BYTES / 4);
  const [index = 0, states = 0, count = 0] = header;
  let at = HEADER_BYTES;
  const doubles = (length: number): Float64Array => {
    const array = new Float64Array(memory, at, length);
    at += 8 * length;
    return array;
  };
  const [bookLoss, occurrenceLoss, aggregateLoss] = [doubles(states), doubles(states), doubles(states)];
  const [day, loss] = [doubles(count), doubles(count)];
  const event = new Uint32Array(memory, at, count);
  const state = new Uint16Array(memory, at + 4 * count, count);
  return { index, states, bookLoss, occurrenceLoss, aggregateLoss, losses: { count, state, event, day, loss } };
}

/** Empty block of that size, to be filled through its columns. */
export function newBlock(index: number, states: number, count: number, allocate: (bytes: number) => ArrayBuffer | SharedArrayBuffer): { memory: ArrayBuffer | SharedArrayBuffer; block: BlockResult } {
  const memory = allocate(bytesOf(states, count));
  new Uint32Array(memory, 0, 3).set([index, states, count]);
  return { memory, block: blockIn(memory) };
}

/** Whether memory holds what a block of that number should: stored blocks are read back from outside. */
export function isBlock(memory: ArrayBuffer | SharedArrayBuffer, index: number, states: number): boolean {
  if (memory.byteLength < HEADER_BYTES) return false;
  const [number = -1, size = -1, count = -1] = new Uint32Array(memory, 0, 3);
  return number === index && size === states && memory.byteLength === bytesOf(states, count);
}
