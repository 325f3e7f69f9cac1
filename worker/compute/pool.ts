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

/** Blocks that are known from before, and where new ones are told. */
export interface BlockStore {
  readonly known: ReadonlyMap<number, SharedArrayBuffer>;
  readonly keep: (index: number, memory: SharedArrayBuffer) => void;
}

const NO_STORE: BlockStore = { known: new Map(), keep: () => undefined };

export interface Computer {
  /**
   * Values a run on all threads, task by task.
   * @param onProgress how many blocks are done; the last step is all that follows them
   * @param signal ends the work at once: the threads are taken down, new ones come with the next run
   * @throws EngineInputError, ComputeAborted, or an error of ours
   */
  value(inputs: ValuationInputs, onProgress: OnProgress, signal: AbortSignal, store?: BlockStore): Promise<Valuation>;
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

async function runOn(crew: readonly Thread[], inputs: ValuationInputs, onProgress: OnProgress, store: BlockStore): Promise<Valuation> {
  const [leader, ...others] = crew;
  if (leader === undefined) throw new Error('a pool needs a thread');
  const [prepared] = await Promise.all(crew.map((thread) => thread.ask({ kind: 'prepare', inputs }, 'prepared')));
  if (prepared === undefined) throw new Error('a pool needs a thread');
  const { size } = prepared;
  const memory = shareMemory(size, shared);
  await Promise.all(crew.map((thread) => thread.ask({ kind: 'share', memory }, 'done')));
  let done = 0;
  const told = (found: Found): void => {
    if (found.kind !== 'block') return;
    done += 1;
    onProgress(done, size.blocks + 1);
    if (found.memory instanceof SharedArrayBuffer) store.keep(found.index, found.memory);
  };
  const blockOf = (task: Task): Found | null => {
    const known = task.kind === 'block' ? store.known.get(task.index) : undefined;
    return task.kind === 'block' && known !== undefined ? { kind: 'block', index: task.index, memory: known } : null;
  };
  let found: readonly Found[] = [];
  for (;;) {
    const [step] = await Promise.all([
      leader.ask({ kind: 'lead', found }, 'wave', 'valued'),
      ...others.map((thread) => thread.ask({ kind: 'take', found }, 'done')),
    ]);
    if (step.kind === 'valued') {
      await Promise.all(crew.map((thread) => thread.ask({ kind: 'release' }, 'done')));
      return step.valuation;
    }
    const known = step.tasks.map(blockOf);
    done += known.filter((block) => block !== null).length;
    const fresh = await share(crew, step.tasks.filter((_task, t) => known[t] === null), told);
    found = known.map((block) => block ?? fresh.shift()).filter((one) => one !== undefined);
  }
}

/** A pool of worker threads that serves one run at a time with all of them. */
export function computePool(size = availableParallelism(), file = THREAD_FILE): Computer {
  let threads: Thread[] = [];
  const takeDown = async (): Promise<void> => {
    const ended = threads;
    threads = [];
    await Promise.all(ended.map((thread) => thread.end()));
  };

  return {
    async value(inputs, onProgress, signal, store = NO_STORE) {
      if (signal.aborted) throw new ComputeAborted();
      const stop = (): void => void takeDown();
      signal.addEventListener('abort', stop, { once: true });
      try {
        while (threads.length < size) threads.push(new Thread(file));
        return await runOn(threads, inputs, onProgress, store);
      } catch (error) {
        // A thread that failed in the middle may still be at work on its task: none of them serves the next run.
        await takeDown();
        throw signal.aborted ? new ComputeAborted() : error;
      } finally {
        signal.removeEventListener('abort', stop);
      }
    },
    close: takeDown,
  };
}
