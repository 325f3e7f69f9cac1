import { checkDeductions, checkLayer } from '../model/check';
import type { LayerTerms } from '../model/layer';
import { demand } from '../model/refusal';
import { reachOfLayers } from '../layers/counting';
import { layersAgain } from './course';
import { perform } from './tasks';
import type { Valuation } from './valuation';
import type { Workspace } from './workspace';

/**
 * Prices other layers on what a valued run has drawn: its occurrences, losses and house stay, so that only the layers and
 * the programme are valued again. The same bytes as a run of those layers from the beginning.
 * @param workspace of a run that has been valued in this thread
 * @param layers may reach no lower than the run's own did, for losses below were not kept
 * @throws EngineInputError
 */
export function priceAgain(workspace: Workspace, layers: readonly LayerTerms[]): Valuation {
  const { prepared } = workspace;
  demand(layers.length > 0, 'The number of layers of a programme', layers.length, 'above 0');
  for (const layer of layers) {
    checkLayer(layer);
    checkDeductions(layer, prepared.inputs.basis);
  }
  const reach = reachOfLayers(layers);
  demand(reach >= prepared.programme.reach, 'The least loss that the layers count', reach, `at least what the run kept, ${prepared.programme.reach}`);
  const steps = layersAgain(workspace.withLayers(layers));
  let step = steps.next();
  while (step.done !== true) {
    const { tasks, workspace: changed } = step.value;
    step = steps.next(tasks.map((task) => perform(changed, task)));
  }
  return step.value;
}
