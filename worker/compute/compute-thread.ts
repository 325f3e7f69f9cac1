import { parentPort } from 'node:worker_threads';
import { EngineInputError, joinBlocks, prepare, valueBlock, type Prepared } from '../engine';
import { buffersOf, type Answer, type Ask } from './messages';

let prepared: Prepared | null = null;

function answer(ask: Ask): { answer: Answer; transfer: ArrayBuffer[] } {
  if (ask.kind === 'prepare') {
    prepared = prepare(ask.inputs);
    return { answer: { kind: 'prepared', blocks: prepared.blocks }, transfer: [] };
  }
  if (prepared === null) throw new Error('a thread was asked for a block before it was prepared');
  if (ask.kind === 'block') {
    const block = valueBlock(prepared, ask.index);
    return { answer: { kind: 'block', block }, transfer: buffersOf(block) };
  }
  const valuation = joinBlocks(prepared, ask.blocks);
  const { capital, payoffs } = valuation.series;
  return { answer: { kind: 'joined', valuation }, transfer: [capital, ...payoffs].map((array) => array.buffer as ArrayBuffer) };
}

parentPort?.on('message', (ask: Ask) => {
  try {
    const { answer: reply, transfer } = answer(ask);
    parentPort?.postMessage(reply, transfer);
  } catch (error) {
    const reply: Answer =
      error instanceof EngineInputError
        ? { kind: 'refused', words: error.message }
        : { kind: 'broken', stack: error instanceof Error ? (error.stack ?? error.message) : String(error) };
    parentPort?.postMessage(reply);
  }
});
