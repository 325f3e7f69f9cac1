import type { ChildProcess } from 'node:child_process';
import { setTimeout as sleep } from 'node:timers/promises';
import { endProcess, type StopSignals } from './left-over';

export interface KeptProcessPlan {
  readonly name: string;
  readonly spawn: () => ChildProcess;
  /** Whether it serves now; asked again and again until it does. */
  readonly serves: () => Promise<boolean>;
  /** Milliseconds that it may take until it serves. */
  readonly patience: number;
  readonly stopSignals: StopSignals;
  readonly say: (text: string) => void;
  /** The last words of its log, said when it dies. */
  readonly lastWords: () => string;
}

const SHORTEST_DELAY = 200;
const LONGEST_DELAY = 10_000;
const STEADY = 60_000;

/** Milliseconds to wait before the next start: doubling, and short again after a minute that went well. */
export function nextDelay(previous: number, upFor: number): number {
  if (upFor >= STEADY || previous === 0) return SHORTEST_DELAY;
  return Math.min(previous * 2, LONGEST_DELAY);
}

/** A process that is started again whenever it ends before it is told to. */
export class KeptProcess {
  private child: ChildProcess | null = null;
  private readonly stopping = new AbortController();
  private restarting: Promise<void> | null = null;
  private delay = 0;

  constructor(private readonly plan: KeptProcessPlan) {}

  get pid(): number | undefined {
    return this.child?.pid;
  }

  /** Starts it and waits until it serves. Rejects with its last words when it ends instead. */
  async start(): Promise<void> {
    this.stopping.signal.throwIfAborted();
    const { name } = this.plan;
    const child = this.plan.spawn();
    this.child = child;
    const ended = new Promise<never>((_, reject) => {
      child.once('error', (error) => reject(new Error(`${name} cannot be run: ${error.message}`)));
      child.once('exit', (code, signal) => {
        reject(new Error(`${name} ended (${signal ?? code ?? 'unknown'}) before it served.\n${this.plan.lastWords()}`));
      });
    });
    const waiting = new AbortController();
    try {
      await Promise.race([ended, this.untilServing(waiting.signal)]);
    } catch (error) {
      if (child.pid !== undefined) await endProcess(child.pid, this.plan.stopSignals);
      throw error;
    } finally {
      waiting.abort();
    }
    const since = Date.now();
    const onExit = (): void => {
      if (!this.stopping.signal.aborted) this.restarting = this.restart(Date.now() - since);
    };
    if (child.exitCode !== null || child.signalCode !== null) onExit();
    else child.once('exit', onExit);
  }

  private async untilServing(given: AbortSignal): Promise<void> {
    const { name, patience, serves, lastWords } = this.plan;
    for (const until = Date.now() + patience; !given.aborted && !(await serves()); await sleep(30)) {
      if (Date.now() > until) throw new Error(`${name} does not answer after ${patience / 1000} s.\n${lastWords()}`);
    }
  }

  private async restart(upFor: number): Promise<void> {
    const { name, say, lastWords } = this.plan;
    for (let up = upFor; ; up = 0) {
      this.delay = nextDelay(this.delay, up);
      say(`${name} ended unexpectedly; starting it again in ${this.delay / 1000} s.\n${lastWords()}`);
      try {
        await sleep(this.delay, undefined, { signal: this.stopping.signal });
        await this.start();
        say(`${name} is back.`);
        return;
      } catch (error) {
        if (this.stopping.signal.aborted) return;
        say(error instanceof Error ? error.message : String(error));
      }
    }
  }

  /** Ends it for good, a restart under way included. May be called more than once. */
  async stop(): Promise<void> {
    this.stopping.abort();
    const child = this.child;
    if (child?.pid !== undefined && child.exitCode === null && child.signalCode === null) {
      await endProcess(child.pid, this.plan.stopSignals);
    }
    await this.restarting;
  }
}
