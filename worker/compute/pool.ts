import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import { shareMemory, type Found, type Task, type Valuation, type ValuationInputs } from '../engine';
import { ComputeAborted, Thread } from './thread';

export { ComputeAborted } from './thread';

/** The compiled file of a thread. */
export const THREAD_FILE = join(__dirname, 'compute-thread.js');

const shared = (bytes: number): SharedArrayBuffer => new SharedArrayBuffer(bytes);

/** How far a run is: whole blocks, and one step more for what follows them. */
export type OnProgress = (done: number, total: number) => void;

/** Blocks that are known from before, by number. */
export type KnownBlocks = ReadonlyMap<number, Uint8Array>;

export interface Computer {
  /**
   * Values a run on all threads, task by task.
   * @param known blocks that need not be valued again
   * @param onProgress how many blocks are done; the last step is all that follows them
   * @param signal ends the work at once: the threads are taken down, new ones come with the next run
   * @throws EngineInputError, ComputeAborted, or an error of ours
   */
  value(inputs: ValuationInputs, known: KnownBlocks, onProgress: OnProgress, signal: AbortSignal): Promise<Valuation>;
  /** Values some of a run's blocks, telling each as it is done. */
  blocks(inputs: ValuationInputs, indexes: readonly number[], done: (index: number, bytes: Uint8Array) => void, signal: AbortSignal): Promise<void>;
  close(): Promise<void>;
}

/** Lets every thread take the next task as it is free; answers what they found in the tasks' order. */
async function share(crew: readonly Thread[], tasks: readonly Task[], told: (found: Found) => void): Promise<Found[]> {
  const found: Found[] = [];
  let next = 0;
  const serve = async (thread: Thread): Promise<void> => {
    for (let at = next; at < tasks.length; at = next) {
      next = at + 1;
      const task = tasks[at];
      if (task === undefined) return;
      const answer = await thread.ask({ kind: 'do', task }, 'found');
      found[at] = answer.found;
      told(answer.found);
    }
  };
  await Promise.all(crew.map(serve));
  return found;
}

/** What is wanted of a run: its valuation, or only some of its blocks. */
interface Wanted {
  readonly known: KnownBlocks;
  readonly only: ReadonlySet<number> | null;
  readonly told: (found: Found, blocks: number) => void;
}

/** A block as threads share it. */
function sharedBlock(index: number, bytes: Uint8Array): Found {
  const memory = new SharedArrayBuffer(bytes.byteLength);
  new Uint8Array(memory).set(bytes);
  return { kind: 'block', index, memory };
}

/** The waves of a run, one after another; null where only blocks were wanted. */
async function runOn(crew: readonly Thread[], inputs: ValuationInputs, { known, only, told }: Wanted): Promise<Valuation | null> {
  const [leader, ...others] = crew;
  const [prepared] = await Promise.all(crew.map((thread) => thread.ask({ kind: 'prepare', inputs }, 'prepared')));
  if (leader === undefined || prepared === undefined) throw new Error('a pool needs a thread');
  const { size } = prepared;
  const memory = shareMemory(size, shared);
  await Promise.all(crew.map((thread) => thread.ask({ kind: 'share', memory }, 'done')));
  let found: readonly Found[] = [];
  for (;;) {
    const [step] = await Promise.all([
      leader.ask({ kind: 'lead', found }, 'wave', 'valued'),
      ...others.map((thread) => thread.ask({ kind: 'take', found }, 'done')),
    ]);
    if (step.kind === 'valued') return step.valuation;
    const { tasks } = step;
    const before = tasks.map((task) => {
      const bytes = task.kind === 'block' ? known.get(task.index) : undefined;
      return task.kind === 'block' && bytes !== undefined ? sharedBlock(task.index, bytes) : null;
    });
    const isBlocks = tasks.some((task) => task.kind === 'block');
    const fresh = tasks.filter((task, t) => before[t] === null && (only === null || task.kind !== 'block' || only.has(task.index)));
    const rest = await share(crew, fresh, (one) => told(one, size.blocks));
    if (isBlocks && only !== null) return null;
    found = before.map((block) => block ?? rest.shift()).filter((one) => one !== undefined);
  }
}

/** A pool of worker threads that serves one run at a time with all of them. */
export function computePool(size = availableParallelism(), file = THREAD_FILE): Computer {
  let threads: Thread[] = [];
  let turn: Promise<unknown> = Promise.resolve();
  const takeDown = async (): Promise<void> => {
    const ended = threads;
    threads = [];
    await Promise.all(ended.map((thread) => thread.end()));
  };

  const serve = async (inputs: ValuationInputs, wanted: Wanted, signal: AbortSignal): Promise<Valuation | null> => {
    if (signal.aborted) throw new ComputeAborted();
    const stop = (): void => void takeDown();
    signal.addEventListener('abort', stop, { once: true });
    try {
      while (threads.length < size) threads.push(new Thread(file));
      const crew = threads;
      const valuation = await runOn(crew, inputs, wanted);
      await Promise.all(crew.map((thread) => thread.ask({ kind: 'release' }, 'done')));
      return valuation;
    } catch (error) {
      // A thread that failed in the middle may still be at work on its task: none of them serves the next run.
      await takeDown();
      throw signal.aborted ? new ComputeAborted() : error;
    } finally {
      signal.removeEventListener('abort', stop);
    }
  };
  const inTurn = (inputs: ValuationInputs, wanted: Wanted, signal: AbortSignal): Promise<Valuation | null> => {
    const served = turn.then(() => serve(inputs, wanted, signal));
    turn = served.catch(() => undefined);
    return served;
  };

  return {
    async value(inputs, known, onProgress, signal) {
      let done = known.size;
      const told: Wanted['told'] = (found, blocks) => {
        if (found.kind !== 'block') return;
        done += 1;
        onProgress(done, blocks + 1);
      };
      const valuation = await inTurn(inputs, { known, only: null, told }, signal);
      if (valuation === null) throw new Error('a run ended without its valuation');
      return valuation;
    },
    async blocks(inputs, indexes, done, signal) {
      const told: Wanted['told'] = (found) => {
        if (found.kind === 'block') done(found.index, new Uint8Array(found.memory));
      };
      await inTurn(inputs, { known: new Map(), only: new Set(indexes), told }, signal);
    },
    close: takeDown,
  };
}
