import type { Attempt, RunBlocks, RunDesk } from '../../../api/domain/run/run';
import type { Notice } from '../../../api/domain/shared/stream';
import type { Wake } from '../../../api/queue/port';
import { EngineInputError, payoffInEveryState, type Valuation, type ValuationInputs } from '../../engine';
import { engineInputs } from './engine-inputs';
import { beating, type Heart } from './heart';
import { idOfAttempt, idOfPart, isLarge, partsOf, type Part } from './parts';
import { GivenUp, type RunWork } from './port';
import { resultHash, resultOf } from './result';

const NOTICE_MILLISECONDS = 250;

/** Told how many blocks of how many are done; what follows them counts as one more. */
type OnProgress = (done: number, total: number) => void;
/** Blocks known from before, by number. */
export type KnownBlocks = ReadonlyMap<number, Uint8Array>;

export interface RunJobDeps {
  readonly desk: RunDesk;
  readonly blocks: RunBlocks;
  readonly read: (runId: string) => Promise<RunWork>;
  readonly value: (inputs: ValuationInputs, known: KnownBlocks, onProgress: OnProgress, signal: AbortSignal) => Promise<Valuation>;
  /** Values only these blocks, telling each as it is done. */
  readonly valueBlocks: (inputs: ValuationInputs, indexes: readonly number[], done: (index: number, bytes: Uint8Array) => void, signal: AbortSignal) => Promise<void>;
  readonly flow: (parent: Wake, children: readonly Wake[]) => Promise<void>;
  readonly publish: (notice: Notice) => Promise<void>;
  /** Reports trouble of ours; answers the id under which it is found. */
  readonly report: (error: unknown) => string;
  readonly mostAttempts: number;
  /** Keeps the heart of a run that waits for its parts. */
  readonly waiting: WaitingRuns;
}

/** Hearts of runs that this process has handed out in parts; they beat until their run ends or another attempt has it. */
export interface WaitingRuns {
  add(attempt: Attempt, heart: Heart): void;
  remove(attempt: Attempt): Promise<void>;
  /** Gives up all of them: they are resumed after the start. */
  close(release: (attempt: Attempt) => Promise<void>): Promise<void>;
}

export function waitingRuns(): WaitingRuns {
  const hearts = new Map<string, { attempt: Attempt; heart: Heart }>();
  const remove = async (attempt: Attempt): Promise<void> => {
    const id = idOfAttempt(attempt);
    const held = hearts.get(id);
    hearts.delete(id);
    await held?.heart.end();
  };
  return {
    add: (attempt, heart) => void hearts.set(idOfAttempt(attempt), { attempt, heart }),
    remove,
    async close(release) {
      for (const { attempt } of [...hearts.values()]) {
        await remove(attempt);
        await release(attempt);
      }
    },
  };
}

const saying = (deps: RunJobDeps, { runId }: Attempt) => (state: string, heart?: Heart): Promise<void> => {
  const progress = heart?.progress() ?? null;
  return deps.publish({ topic: 'run', id: runId, state, ...(progress === null ? {} : { progress }) });
};

/**
 * Values one run, a large one in parts. The attempt's number fences it: should the worker be taken for dead and another
 * begin, nothing that this one still writes is taken. The heart beats beside the computation, says how far it is and hears
 * of a cancel.
 */
export async function runJob(deps: RunJobDeps, runId: string): Promise<void> {
  const attempt = await deps.desk.begin(runId);
  if (attempt === null) {
    // It may just have ended, with nobody left to say so.
    await deps.publish({ topic: 'run', id: runId });
    return;
  }
  await attempted(deps, attempt, async (heart, signal) => {
    heart.now({ done: 0, total: 1, doing: 'reading what the run rests on' });
    await saying(deps, attempt)('running', heart);
    const work = await deps.read(runId);
    if (isLarge(work.states)) await handOut(deps, attempt, work);
    else await valueWhole(deps, attempt, work, new Map(), heart, signal);
  });
}

/** Does a part of a large run: the blocks that are not kept yet. */
export async function blocksJob(deps: RunJobDeps, { attempt, from, to }: Part): Promise<void> {
  await attempted(deps, attempt, async (heart, signal) => {
    const kept = new Set(await deps.blocks.kept(attempt.runId));
    const wanted = Array.from({ length: to - from }, (_unused, i) => from + i).filter((index) => !kept.has(index));
    if (wanted.length === 0) return;
    const work = await deps.read(attempt.runId);
    const last = partsOf(attempt, work.states).at(-1);
    let done = kept.size;
    const writes: Promise<void>[] = [];
    await deps.valueBlocks(
      engineInputs(work),
      wanted,
      (index, bytes) => {
        writes.push(deps.blocks.keep(attempt, index, bytes));
        done += 1;
        heart.now({ done, total: (last?.to ?? 0) + 1, doing: 'valuing simulated years' });
        void saying(deps, attempt)('running', heart);
      },
      signal,
    );
    await Promise.all(writes);
  });
}

/** Joins the parts of a large run; a block that is missing after all is done here. */
export async function joinJob(deps: RunJobDeps, attempt: Attempt): Promise<void> {
  await attempted(deps, attempt, async (heart, signal) => {
    const work = await deps.read(attempt.runId);
    const known = new Map((await deps.blocks.read(attempt.runId)).map(({ index, bytes }) => [index, bytes]));
    await valueWhole(deps, attempt, work, known, heart, signal);
  });
}

/** The parts go to the queue as a flow, whose parent joins them; this process keeps saying that the run lives. */
async function handOut(deps: RunJobDeps, attempt: Attempt, work: RunWork): Promise<void> {
  const parts = partsOf(attempt, work.states);
  const say = saying(deps, attempt);
  const heart = beating(deps, attempt, (asked) => {
    void deps.waiting.remove(attempt).catch(deps.report);
    if (asked === 'cancel') void endCancelled(deps, attempt, say).catch(deps.report);
  });
  deps.waiting.add(attempt, heart);
  try {
    await deps.flow(
      { id: `join-${idOfAttempt(attempt)}`, topic: 'run.join', subjectId: idOfAttempt(attempt) },
      parts.map((part): Wake => ({ id: `part-${idOfPart(part)}`, topic: 'run.blocks', subjectId: idOfPart(part) })),
    );
  } catch (error) {
    await deps.waiting.remove(attempt);
    throw error;
  }
}

async function valueWhole(deps: RunJobDeps, attempt: Attempt, work: RunWork, known: KnownBlocks, heart: Heart, signal: AbortSignal): Promise<void> {
  const say = saying(deps, attempt);
  if (known.size === 0) heart.now({ done: 0, total: 1, doing: 'drawing occurrences' });
  let told = 0;
  const valuation = await deps.value(
    engineInputs(work),
    known,
    (done, total) => {
      heart.now({ done, total, doing: done + 1 < total ? 'valuing simulated years' : 'weighing them into prices' });
      if (Date.now() - told < NOTICE_MILLISECONDS) return;
      told = Date.now();
      void say('running', heart);
    },
    signal,
  );
  const result = resultOf(valuation, work.terms, work.basis);
  const series = [
    { name: 'capital', values: valuation.series.capital },
    ...valuation.series.paying.map((paying, l) => ({ name: work.terms.layers[l]?.key ?? String(l), values: payoffInEveryState(paying, valuation.states) })),
  ];
  await heart.end();
  if (await deps.desk.succeed(attempt, { json: result, hash: resultHash(result, series), series })) await say('succeeded');
  else if (heart.asked() !== 'lost') await endCancelled(deps, attempt, say);
}

/** Does something in an attempt under its heart, and ends it as the outcome asks. */
async function attempted(deps: RunJobDeps, attempt: Attempt, work: (heart: Heart, signal: AbortSignal) => Promise<void>): Promise<void> {
  const say = saying(deps, attempt);
  const stop = new AbortController();
  const heart = beating(deps, attempt, () => stop.abort());
  try {
    await work(heart, stop.signal);
  } catch (error) {
    await heart.end();
    if (heart.asked() === 'lost') return;
    await deps.waiting.remove(attempt);
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
