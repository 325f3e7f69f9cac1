import type { ValuationInputs } from '../model/inputs';
import { plainMemory } from '../model/memory';
import { prepare } from '../model/prepare';
import { course, type Step } from './course';
import { perform } from './tasks';
import type { Valuation } from './valuation';
import { Workspace, shareMemory } from './workspace';

/** A workspace of this thread's own. @throws EngineInputError in words fit for a person */
export function openWorkspace(inputs: ValuationInputs): Workspace {
  const prepared = prepare(inputs);
  return new Workspace(prepared, shareMemory({ rows: prepared.rows, tabledRows: prepared.tabledRows, states: inputs.grid.states }, plainMemory), plainMemory);
}

/** Values a run in this thread: the same bytes as any number of threads. @throws EngineInputError */
export function value(inputs: ValuationInputs): Valuation {
  const workspace = openWorkspace(inputs);
  const steps = course(workspace);
  let step: IteratorResult<Step, Valuation> = steps.next();
  while (step.done !== true) {
    const { tasks } = step.value;
    step = steps.next(tasks.map((task) => perform(workspace, task)));
  }
  return step.value;
}
