import { Worker } from 'node:worker_threads';
import { EngineInputError } from '../engine';
import type { Answer, AnswerOf, Ask } from './messages';

/** Thrown where the signal ended the work. */
export class ComputeAborted extends Error {
  constructor() {
    super('the computation was ended');
    this.name = 'ComputeAborted';
  }
}

/** A worker thread that answers one ask at a time. */
export class Thread {
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

  private send(ask: Ask): Promise<Answer> {
    return new Promise((resolve, reject) => {
      this.pending = { resolve, reject };
      this.worker.postMessage(ask);
    });
  }

  /** Asks, and holds the thread to the kind of answer that the ask has. */
  async ask<K extends Answer['kind']>(ask: Ask, ...kinds: readonly K[]): Promise<AnswerOf<K>> {
    const answer = await this.send(ask);
    if (!isOf(answer, kinds)) throw new Error(`a thread asked to ${ask.kind} answered ${answer.kind}`);
    return answer;
  }

  end(): Promise<number> {
    return this.worker.terminate();
  }
}

function isOf<K extends Answer['kind']>(answer: Answer, kinds: readonly K[]): answer is AnswerOf<K> {
  return kinds.some((kind) => kind === answer.kind);
}
