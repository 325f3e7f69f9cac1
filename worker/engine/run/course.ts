import type { ExactMeans } from '../measures/self-check';
import { WAVES, type Found, type Task } from './tasks';
import { valuationOf, type Valuation } from './valuation';
import type { Workspace } from './workspace';

/** Tasks that need nothing of each other. */
export interface Step {
  readonly tasks: readonly Task[];
}

/** Takes into a workspace what a wave's tasks found, in the tasks' order. Every thread of a run does it alike. */
export function takeFound(workspace: Workspace, found: readonly Found[]): void {
  const house = found.flatMap((one) => (one.kind === 'house' ? [one.part] : []));
  if (house.length > 0) workspace.takeHouse(house, workspace.risklessRate);
  for (const one of found) {
    if (one.kind === 'block') workspace.takeBlock(one.index, one.memory);
    else if (one.kind === 'rate') workspace.risklessRate = one.risklessRate;
    else if (one.kind === 'lean') workspace.bins = one.bins;
    else if (one.kind === 'layer') workspace.layers[one.index] = one.layer;
  }
}

/**
 * The course of a run: yields a wave of tasks, is given what they found in the tasks' order, and returns the valuation.
 * Who does the tasks, and in which order, leaves no trace: sums are joined by block and task, never by time.
 */
export function* course(workspace: Workspace): Generator<Step, Valuation, readonly Found[]> {
  const wave = function* (tasks: readonly Task[]): Generator<Step, readonly Found[], readonly Found[]> {
    const found = yield { tasks };
    takeFound(workspace, found);
    return found;
  };
  yield* wave(WAVES.laws(workspace));
  yield* wave(WAVES.blocks(workspace));
  return yield* pricing(workspace, wave);
}

/** The part of a run that follows its blocks. */
export function* pricing(
  workspace: Workspace,
  wave: (tasks: readonly Task[]) => Generator<Step, readonly Found[], readonly Found[]>,
): Generator<Step, Valuation, readonly Found[]> {
  yield* wave(WAVES.rate());
  yield* wave(WAVES.house(workspace));
  yield* wave(WAVES.lean());
  yield* wave(WAVES.layers(workspace));
  const whole = yield* wave(WAVES.whole(workspace));
  const of = <K extends Found['kind']>(kind: K): Extract<Found, { kind: K }>[] => whole.filter((one): one is Extract<Found, { kind: K }> => one.kind === kind);
  const [programme] = of('programme');
  const [occurrence, aggregate] = of('curve');
  const [tailBefore] = of('tail');
  if (programme === undefined || occurrence === undefined || aggregate === undefined || tailBefore === undefined) throw new Error('a task of the run did not answer');
  const after = yield* wave(WAVES.after(programme.programme.parts));
  const tailAfter = after.find((one) => one.kind === 'tail');
  return valuationOf(workspace, {
    programme: programme.programme,
    occurrence: occurrence.points,
    aggregate: aggregate.points,
    groundUp: aggregate.mean,
    tailBefore: tailBefore.points,
    tailAfter: tailAfter?.points ?? [],
    means: of('check').map(({ means }): ExactMeans => means),
  });
}
