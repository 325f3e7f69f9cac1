import { parentPort } from 'node:worker_threads';
import { EngineInputError, Workspace, course, perform, prepare, takeFound, type Found, type Prepared, type Step, type Valuation } from '../engine';
import type { Answer, Ask } from './messages';

const shared = (bytes: number): SharedArrayBuffer => new SharedArrayBuffer(bytes);

let prepared: Prepared | null = null;
let workspace: Workspace | null = null;
let steps: Generator<Step, Valuation, readonly Found[]> | null = null;

function lead(of: Workspace, found: readonly Found[]): Answer {
  steps ??= course(of);
  const step = steps.next(found);
  return step.done === true ? { kind: 'valued', valuation: step.value } : { kind: 'wave', tasks: step.value.tasks };
}

function answer(ask: Ask): Answer {
  if (ask.kind === 'prepare') {
    prepared = prepare(ask.inputs);
    const { rows, tabledRows, blocks, inputs } = prepared;
    return { kind: 'prepared', size: { rows, tabledRows, blocks, states: inputs.grid.states } };
  }
  if (ask.kind === 'release') {
    prepared = workspace = steps = null;
    return { kind: 'done' };
  }
  if (prepared === null) throw new Error('a thread was asked for work before it was prepared');
  if (ask.kind === 'share') {
    workspace = new Workspace(prepared, ask.memory, shared);
    return { kind: 'done' };
  }
  if (workspace === null) throw new Error('a thread was asked for work before it had memory');
  if (ask.kind === 'lead') return lead(workspace, ask.found);
  if (ask.kind === 'do') return { kind: 'found', found: perform(workspace, ask.task) };
  takeFound(workspace, ask.found);
  return { kind: 'done' };
}

function answerOrFault(ask: Ask): Answer {
  try {
    return answer(ask);
  } catch (error) {
    return error instanceof EngineInputError
      ? { kind: 'refused', words: error.message }
      : { kind: 'broken', stack: error instanceof Error ? (error.stack ?? error.message) : String(error) };
  }
}

parentPort?.on('message', (ask: Ask) => parentPort?.postMessage(answerOrFault(ask)));
