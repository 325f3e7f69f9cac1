import type { ExactMeans } from '../measures/self-check';
import { WAVES, type Found, type Task } from './tasks';
import { valuationOf, type Curves, type Valuation } from './valuation';
import type { Workspace } from './workspace';

/** Tasks that need nothing of each other, and the run that they are of. */
export interface Step {
  readonly tasks: readonly Task[];
  readonly workspace: Workspace;
}

type Wave = Generator<Step, readonly Found[], readonly Found[]>;

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

function* wave(workspace: Workspace, tasks: readonly Task[]): Wave {
  const found = yield { tasks, workspace };
  takeFound(workspace, found);
  return found;
}

function only<K extends Found['kind']>(found: readonly Found[], kind: K): Extract<Found, { kind: K }>[] {
  return found.filter((one): one is Extract<Found, { kind: K }> => one.kind === kind);
}

/**
 * The course of a run: yields a wave of tasks, is given what they found in the tasks' order, and returns the valuation.
 * Who does the tasks, and in which order, leaves no trace: sums are joined by block and task, never by time.
 */
export function* course(workspace: Workspace): Generator<Step, Valuation, readonly Found[]> {
  yield* wave(workspace, WAVES.laws(workspace));
  yield* wave(workspace, WAVES.blocks(workspace));
  yield* wave(workspace, WAVES.rate());
  yield* wave(workspace, WAVES.house(workspace));
  // The exact means need nothing of the lean order: they keep other threads busy meanwhile.
  const found = yield* wave(workspace, [...WAVES.lean(), ...WAVES.check(workspace)]);
  return yield* layersAgain(workspace, only(found, 'check').map(({ means }) => means));
}

/**
 * The part of a run that values its layers on a house that is known.
 * @param known exact means of these layers; null: still to be found
 */
export function* layersAgain(workspace: Workspace, known: readonly ExactMeans[] | null = null): Generator<Step, Valuation, readonly Found[]> {
  yield* wave(workspace, WAVES.layers(workspace));
  const whole = yield* wave(workspace, [...WAVES.programme(), ...(workspace.curves === null ? WAVES.curves() : []), ...(known === null ? WAVES.check(workspace) : [])]);
  const [programme] = only(whole, 'programme');
  if (programme === undefined) throw new Error('the programme of the run was not valued');
  workspace.curves ??= curvesOf(whole);
  const after = yield* wave(workspace, WAVES.after(programme.programme.parts));
  return valuationOf(workspace, {
    ...workspace.curves,
    programme: programme.programme,
    tailAfter: only(after, 'tail')[0]?.points ?? [],
    means: known ?? only(whole, 'check').map(({ means }) => means),
  });
}

function curvesOf(found: readonly Found[]): Curves {
  const [occurrence, aggregate] = only(found, 'curve');
  const [tailBefore] = only(found, 'tail');
  if (occurrence === undefined || aggregate === undefined || tailBefore === undefined) throw new Error('a curve of the run was not made');
  return { occurrence: occurrence.points, aggregate: aggregate.points, groundUp: aggregate.mean, tailBefore: tailBefore.points };
}
