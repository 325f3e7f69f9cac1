import type { Attempt, Progress, RunDesk } from '../../../api/domain/run/run';

const BEAT_MILLISECONDS = 500;

/** What the desk asks of an attempt. */
export type Asked = 'go on' | 'cancel' | 'lost';

export interface Heart {
  /** How far the attempt is; null: somebody else says so. */
  progress(): Progress | null;
  now(progress: Progress): void;
  asked(): Asked;
  end(): Promise<void>;
}

/**
 * Beats beside a computation, at once and then twice a second: says that the attempt lives and how far it is, and hears of a cancel or of being overtaken.
 * @param heard told once of anything but "go on"
 */
export function beating(deps: { readonly desk: Pick<RunDesk, 'beat'>; readonly report: (error: unknown) => string }, attempt: Attempt, heard: (asked: Asked) => void): Heart {
  let progress: Progress | null = null;
  let asked: Asked = 'go on';
  let beat: Promise<void> = Promise.resolve();
  let ended = false;
  const once = async (): Promise<void> => {
    try {
      const answer = await deps.desk.beat(attempt, progress);
      if (answer === 'go on' || asked !== 'go on') return;
      asked = answer;
      heard(answer);
    } catch (error) {
      // The database is away: the computation goes on, and the fence decides when it is back.
      deps.report(error);
    }
  };
  beat = once();
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
