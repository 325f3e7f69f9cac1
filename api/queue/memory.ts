import { FIRST_WAIT_MILLISECONDS, SIDE_BY_SIDE, TRIES, laneOf, type Wake, type WakeHandlers, type WakeQueue } from './port';

interface Lane {
  readonly waiting: { wake: Wake; attempt: number }[];
  running: number;
  readonly most: number;
}

/**
 * The wake queue within one process, for machines without Redis and for tests. What it holds dies with the process, which
 * loses nothing: the sweeper wakes what the rows still ask for.
 */
export function memoryQueue(firstWaitMilliseconds = FIRST_WAIT_MILLISECONDS): WakeQueue {
  const lanes: Readonly<Record<'runs' | 'acts', Lane>> = {
    runs: { waiting: [], running: 0, most: 1 },
    acts: { waiting: [], running: 0, most: SIDE_BY_SIDE },
  };
  const seen = new Set<string>();
  /** Of each part of a flow, what waits for it and for how many others. */
  const parentOf = new Map<string, { readonly wake: Wake; children: number }>();
  const timers = new Set<NodeJS.Timeout>();
  const underWay = new Set<Promise<void>>();
  let handlers: WakeHandlers | null = null;
  let report: Parameters<WakeQueue['work']>[1] = () => undefined;
  let closed = false;

  const again = (lane: Lane, wake: Wake, attempt: number): void => {
    const timer = setTimeout(() => {
      timers.delete(timer);
      lane.waiting.push({ wake, attempt });
      turn(lane);
    }, firstWaitMilliseconds * 2 ** (attempt - 2));
    timers.add(timer);
  };
  const run = async (lane: Lane, known: WakeHandlers, wake: Wake, attempt: number): Promise<void> => {
    try {
      await known[wake.topic](wake.subjectId);
    } catch (error) {
      report(error, wake);
      if (closed) return;
      if (attempt < TRIES[wake.topic]) {
        again(lane, wake, attempt + 1);
        return;
      }
    }
    const parent = parentOf.get(wake.id);
    parentOf.delete(wake.id);
    if (parent === undefined) return;
    parent.children -= 1;
    if (parent.children === 0) take(parent.wake);
  };
  const take = (wake: Wake): void => {
    const lane = lanes[laneOf(wake.topic)];
    lane.waiting.push({ wake, attempt: 1 });
    turn(lane);
  };
  const turn = (lane: Lane): void => {
    while (handlers !== null && !closed && lane.running < lane.most) {
      const next = lane.waiting.shift();
      if (next === undefined) return;
      lane.running += 1;
      const work = run(lane, handlers, next.wake, next.attempt).finally(() => {
        lane.running -= 1;
        underWay.delete(work);
        turn(lane);
      });
      underWay.add(work);
    }
  };
  return {
    add(wake) {
      if (seen.has(wake.id)) return Promise.resolve();
      seen.add(wake.id);
      take(wake);
      return Promise.resolve();
    },
    addFlow(wake, children) {
      if (seen.has(wake.id)) return Promise.resolve();
      const parent = { wake, children: children.length };
      for (const { id } of [wake, ...children]) seen.add(id);
      for (const child of children) parentOf.set(child.id, parent);
      for (const child of children) take(child);
      if (children.length === 0) take(wake);
      return Promise.resolve();
    },
    check: () => Promise.resolve(),
    work(known, onTrouble) {
      handlers = known;
      report = onTrouble;
      turn(lanes.runs);
      turn(lanes.acts);
    },
    async close() {
      closed = true;
      for (const timer of timers) clearTimeout(timer);
      await Promise.all(underWay);
    },
  };
}
