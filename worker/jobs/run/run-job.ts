import type { Attempt, Progress, RunDesk } from '../../../api/domain/run/run';
import type { Notice } from '../../../api/domain/shared/stream';
import { EngineInputError, type Valuation, type ValuationInputs } from '../../engine';
import { engineInputs } from './engine-inputs';
import { GivenUp, type RunWork } from './port';
import { resultHash, resultOf } from './result';

const BEAT_MILLISECONDS = 500;
const NOTICE_MILLISECONDS = 250;

export interface RunJobDeps {
  readonly desk: RunDesk;
  readonly read: (runId: string) => Promise<RunWork>;
  readonly value: (inputs: ValuationInputs, onProgress: (done: number, total: number) => void, signal: AbortSignal) => Promise<Valuation>;
  readonly publish: (notice: Notice) => Promise<void>;
  /** Reports trouble of ours; answers the id under which it is found. */
  readonly report: (error: unknown) => string;
  readonly mostAttempts: number;
}

type Asked = 'go on' | 'cancel' | 'lost';

/**
 * Values one run. The attempt's number fences it: should the worker be taken for dead and another begin, nothing that this
 * one still writes is taken. The heart beats beside the computation, says how far it is and hears of a cancel.
 */
export async function runJob(deps: RunJobDeps, runId: string): Promise<void> {
  const attempt = await deps.desk.begin(runId);
  if (attempt === null) {
    // It may just have ended, with nobody left to say so.
    await deps.publish({ topic: 'run', id: runId });
    return;
  }
  const say = (state: string, progress?: Progress): Promise<void> => deps.publish({ topic: 'run', id: runId, state, ...(progress ? { progress } : {}) });
  const stop = new AbortController();
  const heart = beating(deps, attempt, stop);
  try {
    await say('running', heart.progress());
    const work = await deps.read(runId);
    heart.now({ done: 0, total: 1, doing: 'drawing occurrences' });
    let told = 0;
    const valuation = await deps.value(
      engineInputs(work),
      (done, total) => {
        heart.now({ done, total, doing: done + 1 < total ? 'valuing simulated years' : 'weighing them into prices' });
        if (Date.now() - told < NOTICE_MILLISECONDS) return;
        told = Date.now();
        void say('running', heart.progress());
      },
      stop.signal,
    );
    const result = resultOf(valuation, work.terms, work.basis);
    const series = [
      { name: 'capital', values: valuation.series.capital },
      ...valuation.series.payoffs.map((values, l) => ({ name: work.terms.layers[l]?.key ?? String(l), values })),
    ];
    await heart.end();
    if (await deps.desk.succeed(attempt, { json: result, hash: resultHash(result, series), series })) await say('succeeded');
    else if (heart.asked() !== 'lost') await endCancelled(deps, attempt, say);
  } catch (error) {
    await heart.end();
    if (heart.asked() === 'lost') return;
    if (heart.asked() === 'cancel') await endCancelled(deps, attempt, say);
    else if (error instanceof EngineInputError) {
      await deps.desk.fail(attempt, error.message);
      await say('failed');
    } else if (error instanceof GivenUp) {
      await deps.desk.release(attempt);
      throw error;
    } else await giveBackOrFail(deps, attempt, error, say);
  } finally {
    await heart.end();
  }
}

async function endCancelled(deps: RunJobDeps, attempt: Attempt, say: (state: string) => Promise<void>): Promise<void> {
  if (await deps.desk.cancelled(attempt)) await say('cancelled');
}

async function giveBackOrFail(deps: RunJobDeps, attempt: Attempt, error: unknown, say: (state: string) => Promise<void>): Promise<void> {
  const id = deps.report(error);
  if (attempt.number >= deps.mostAttempts) {
    await deps.desk.fail(attempt, `The valuation failed on our side (error id ${id}). Start it again; if it fails again, report the id.`);
    await say('failed');
    return;
  }
  await deps.desk.release(attempt);
  throw error;
}

interface Heart {
  progress(): Progress;
  now(progress: Progress): void;
  asked(): Asked;
  end(): Promise<void>;
}

function beating(deps: RunJobDeps, attempt: Attempt, stop: AbortController): Heart {
  let progress: Progress = { done: 0, total: 1, doing: 'reading what the run rests on' };
  let asked: Asked = 'go on';
  let beat: Promise<void> = Promise.resolve();
  let ended = false;
  const once = async (): Promise<void> => {
    try {
      const answer = await deps.desk.beat(attempt, progress);
      if (answer === 'go on') return;
      asked = answer;
      stop.abort();
    } catch (error) {
      // The database is away: the computation goes on, and the fence decides when it is back.
      deps.report(error);
    }
  };
  const timer = setInterval(() => {
    beat = beat.then(() => (ended ? undefined : once()));
  }, BEAT_MILLISECONDS);
  return {
    progress: () => progress,
    now: (next) => (progress = next),
    asked: () => asked,
    async end() {
      ended = true;
      clearInterval(timer);
      await beat;
    },
  };
}
