import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import { EngineInputError, type BlockResult, type Valuation, type ValuationInputs } from '../engine';
import { buffersOf, type Answer, type Ask } from './messages';

/** The compiled file of a thread. */
export const THREAD_FILE = join(__dirname, 'compute-thread.js');

/** Thrown where the signal ended the work. */
export class ComputeAborted extends Error {
  constructor() {
    super('the computation was ended');
    this.name = 'ComputeAborted';
  }
}

export interface Computer {
  /**
   * Values a run on all threads, block by block.
   * @param onProgress how many blocks are done; the last step is the join
   * @param signal ends the work at once: the threads are taken down, new ones come with the next run
   * @throws EngineInputError, ComputeAborted, or an error of ours
   */
  value(inputs: ValuationInputs, onProgress: (done: number, total: number) => void, signal: AbortSignal): Promise<Valuation>;
  close(): Promise<void>;
}

class Thread {
  private readonly worker: Worker;
  private pending: { resolve: (answer: Answer) => void; reject: (error: Error) => void } | null = null;

  constructor(file: string) {
    this.worker = new Worker(file);
    this.worker.on('message', (answer: Answer) => {
      const waiting = this.pending;
      this.pending = null;
      if (answer.kind === 'refused') waiting?.reject(new EngineInputError(answer.words));
      else if (answer.kind === 'broken') waiting?.reject(new Error(answer.stack));
      else waiting?.resolve(answer);
    });
    this.worker.on('error', (error: Error) => this.pending?.reject(error));
    this.worker.on('exit', () => this.pending?.reject(new ComputeAborted()));
  }

  ask(ask: Ask, transfer: readonly ArrayBuffer[] = []): Promise<Answer> {
    return new Promise((resolve, reject) => {
      this.pending = { resolve, reject };
      this.worker.postMessage(ask, transfer);
    });
  }

  end(): Promise<number> {
    return this.worker.terminate();
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

  const work = async (inputs: ValuationInputs, onProgress: (done: number, total: number) => void): Promise<Valuation> => {
    while (threads.length < size) threads.push(new Thread(file));
    const crew = threads;
    const prepared = await Promise.all(crew.map((thread) => thread.ask({ kind: 'prepare', inputs })));
    const first = prepared[0];
    const total = first?.kind === 'prepared' ? first.blocks : 0;
    const blocks: BlockResult[] = [];
    let next = 0;
    let done = 0;
    const serveBlocks = async (thread: Thread): Promise<void> => {
      while (next < total) {
        const index = next;
        next += 1;
        const answer = await thread.ask({ kind: 'block', index });
        if (answer.kind !== 'block') throw new Error('a thread answered something else than its block');
        blocks[index] = answer.block;
        done += 1;
        onProgress(done, total + 1);
      }
    };
    await Promise.all(crew.map(serveBlocks));
    const joined = await crew[0]?.ask({ kind: 'join', blocks }, blocks.flatMap(buffersOf));
    if (joined?.kind !== 'joined') throw new Error('a thread answered something else than the join');
    return joined.valuation;
  };

  return {
    async value(inputs, onProgress, signal) {
      if (signal.aborted) throw new ComputeAborted();
      const stop = (): void => void takeDown();
      signal.addEventListener('abort', stop, { once: true });
      try {
        return await work(inputs, onProgress);
      } catch (error) {
        // A thread that failed in the middle may still be at work on its block: none of them serves the next run.
        await takeDown();
        throw signal.aborted ? new ComputeAborted() : error;
      } finally {
        signal.removeEventListener('abort', stop);
      }
    },
    close: takeDown,
  };
}
