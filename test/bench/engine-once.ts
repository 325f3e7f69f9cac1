import { join } from 'node:path';
import { computePool } from '../../worker/compute/pool';
import { course, openWorkspace, perform, priceAgain, value, type Valuation, type ValuationInputs, type Workspace } from '../../worker/engine';
import { allowedEvents } from '../../worker/engine/layers/filter';
import { layerStates, type LayerStates } from '../../worker/engine/layers/layer-states';
import { plainMemory } from '../../worker/engine/model/memory';
import { benchInputs } from './case';
import { exportOccurrences } from './export';

/** One measurement in a process of its own, so that memory and warming up are its own. Prints one JSON line. */

const seconds = (since: bigint): number => Number(process.hrtime.bigint() - since) / 1e9;
const peakMb = (): number => process.resourceUsage().maxRSS / 1024;

/** What the comparators report too. */
function figures({ layers, programme, house }: Valuation) {
  return {
    perLayer: layers.map((layer) => ({
      expectedLoss: layer.expectedLoss,
      marginalPremium: layer.marginalPremium,
      walkAwayPremium: layer.walkAwayPremium,
      technicalPremium: layer.technicalPremium,
      programmeWalkAwayPart: layer.programmeWalkAwayPart,
      effectiveStates: layer.effectiveStates,
    })),
    programme: { walkAwayPremium: programme.walkAwayPremium },
    house: { largestSharpeRatio: house.largestSharpeRatio, tailBefore: house.tailBefore },
    occurrence: programme.occurrence,
    aggregate: programme.aggregate,
  };
}

function valued(inputs: ValuationInputs): { workspace: Workspace; valuation: Valuation; phases: Record<string, number> } {
  const phases: Record<string, number> = {};
  let last = process.hrtime.bigint();
  const phase = (name: string): void => {
    phases[name] = (phases[name] ?? 0) + seconds(last);
    last = process.hrtime.bigint();
  };
  const workspace = openWorkspace(inputs);
  phase('prepare');
  const steps = course(workspace);
  let step = steps.next();
  while (step.done !== true) {
    const { tasks } = step.value;
    const found = tasks.map((task) => {
      const one = perform(workspace, task);
      phase(task.kind);
      return one;
    });
    step = steps.next(found);
    phase('joining');
  }
  return { workspace, valuation: step.value, phases };
}

function cold(inputs: ValuationInputs) {
  const since = process.hrtime.bigint();
  const { workspace, valuation, phases } = valued(inputs);
  const whole = seconds(since);
  const scaled = inputs.programme.layers.map((layer) => ({ ...layer, limit: layer.limit * 1.1, attachment: layer.attachment * 1.1 }));
  const then = process.hrtime.bigint();
  priceAgain(workspace, scaled);
  return { cold: whole, again: seconds(then), phases, peakMb: peakMb(), results: figures(valuation) };
}

/** The layer kernel alone, on what a run keeps: Z and ρ of every layer in every paying state. Median of the passes. */
function kernel(inputs: ValuationInputs) {
  const { workspace } = valued(inputs);
  const times: number[] = [];
  let valuedLayers: LayerStates[] = [];
  for (let pass = 0; pass < 15; pass += 1) {
    const since = process.hrtime.bigint();
    valuedLayers = inputs.programme.layers.map((layer) => layerStates(layer, workspace.allBlocks(), allowedEvents(workspace.prepared, layer), plainMemory));
    times.push(seconds(since));
  }
  const total = (of: (layer: LayerStates) => Float64Array): number => valuedLayers.reduce((sum, layer) => sum + of(layer).reduce((a, b) => a + b, 0), 0);
  return { median: times.sort((a, b) => a - b)[7] ?? 0, payoffs: total(({ payoff }) => payoff), reinstatements: total(({ reinstatement }) => reinstatement) };
}

async function threads(inputs: ValuationInputs, count: number) {
  const pool = computePool(count, join(__dirname, '../../worker/compute/compute-thread.js'));
  try {
    // A worker's threads live on from run to run: the second run is timed, when their code is warm.
    await pool.value(inputs, new Map(), () => undefined, new AbortController().signal);
    const since = process.hrtime.bigint();
    const valuation = await pool.value(inputs, new Map(), () => undefined, new AbortController().signal);
    return { cold: seconds(since), peakMb: peakMb(), results: figures(valuation) };
  } finally {
    await pool.close();
  }
}

async function main([what = '', events = '', states = '', layers = '', more = '']: readonly string[]): Promise<unknown> {
  const inputs = benchInputs({ events: Number(events), states: Number(states), layers: Number(layers) });
  if (what === 'cold') return cold(inputs);
  if (what === 'kernel') return kernel(inputs);
  if (what === 'threads') return threads(inputs, Number(more));
  if (what === 'export') {
    exportOccurrences(more, inputs);
    return { results: figures(value(inputs)) };
  }
  throw new Error(`nothing is measured under the name ${what}`);
}

main(process.argv.slice(2)).then(
  (measured) => process.stdout.write(`${JSON.stringify(measured)}\n`),
  (error: unknown) => {
    process.stderr.write(`${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`);
    process.exitCode = 1;
  },
);
