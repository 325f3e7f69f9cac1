import {
  course,
  openWorkspace,
  perform,
  value,
  type LayerTerms,
  type ValuationInputs,
} from '../../../worker/engine';
import type { Estimate } from '../../../worker/engine/measures/sums';
import { exceedance } from '../../../worker/engine/measures/exceedance';
import { INVENTED_BASIS, inventedLayer } from '../../../worker/engine/testing/invented';

/** Events of a model to be simulated, each with one certain loss. Counts are Poisson unless the events vary together. */
export interface SimulatedModel {
  /** Keys the random numbers, so that models are independent of one another. */
  readonly name: string;
  readonly events: readonly { readonly rate: number; readonly loss: number }[];
  /**
   * All events together negative binomial with this ratio of variance to mean, above 1: of shape rate/(ratio − 1), thus
   * geometric at 1 + rate.
   */
  readonly varianceToMean?: number;
}

function inputsOf({ name, events, varianceToMean }: SimulatedModel, states: number): ValuationInputs {
  const n = events.length;
  const grouped = varianceToMean !== undefined;
  return {
    grid: { seed: '0f1e2d3c4b5a6978', states },
    catalogues: [
      {
        lineage: name,
        eventNames: events.map((_event, i) => `event ${i}`),
        ratePerYear: Float64Array.from(events, ({ rate }) => rate),
        perils: ['any'],
        perilIndex: new Uint16Array(n),
        regions: ['any'],
        regionIndex: new Uint16Array(n),
        seasonDay: new Float64Array(n).fill(Number.NaN),
        groups: grouped ? [{ name: 'all', varianceToMean }] : [],
        groupIndex: new Int32Array(n).fill(grouped ? 0 : -1),
      },
    ],
    programme: {
      tables: [
        {
          lineage: `losses of ${name}`,
          catalogueLineage: name,
          eventIndex: Int32Array.from(events, (_event, i) => i),
          meanLoss: Float64Array.from(events, ({ loss }) => loss),
          sd: new Float64Array(n),
          commonShare: new Float64Array(n),
          exposedValue: new Float64Array(n).fill(Number.NaN),
          toContractCurrency: 1,
        },
      ],
      layers: [inventedLayer('any', 1, 0)],
      inceptionDay: 1,
      toHouseCurrency: 1,
    },
    book: [],
    basis: INVENTED_BASIS,
  };
}

/** The year's summed loss in each state, as the engine draws it: a run's course up to its blocks. */
export function yearlyLosses(model: SimulatedModel, states: number): Float64Array {
  const workspace = openWorkspace(inputsOf(model, states));
  const steps = course(workspace);
  let step = steps.next();
  while (step.done !== true && step.value.tasks.some(({ kind }) => kind === 'laws' || kind === 'block')) {
    step = steps.next(step.value.tasks.map((task) => perform(workspace, task)));
  }
  return workspace.memory.columns.aggregateLoss;
}

/**
 * The engine's marginal premium of a layer of the model, for a house that is no leaner in one state than in another and to
 * which money is the same now and later: m = 1 in every state, nothing is taken from a premium.
 */
export function premiumWithoutLoads(model: SimulatedModel, terms: LayerTerms, states: number): Estimate {
  const inputs = inputsOf(model, states);
  const basis = {
    ...INVENTED_BASIS,
    riskAversion: 0,
    discounting: { mode: 'anchored', risklessRate: 0 } as const,
    taxes: 0,
    variableExpense: 0,
    lossAdjustment: 0,
    fixedExpensePerContract: 0,
  };
  const programme = { ...inputs.programme, layers: [{ ...terms, brokerage: 0 }] };
  const [layer] = value({ ...inputs, basis, programme }).layers;
  if (layer === undefined) throw new Error('the programme has a layer');
  return layer.marginalPremium;
}

/** The engine's value at 1 in `years` of equally likely yearly figures. */
export function valueAtRisk(figures: Float64Array, years: number): number | null {
  return exceedance(figures, [years])[0]?.value ?? null;
}

/** A simulated mean beside the value that is published for it. */
export interface Compared {
  readonly what: string;
  readonly simulated: number;
  readonly standardError: number;
  readonly published: number;
}

/** Mean of a figure over the states with its standard error, to be held against a published value. */
export function compared(
  what: string,
  losses: Float64Array,
  figure: (loss: number) => number,
  published: number,
): Compared {
  let sum = 0;
  let squares = 0;
  for (const loss of losses) {
    const value = figure(loss);
    sum += value;
    squares += value * value;
  }
  const simulated = sum / losses.length;
  const variance = Math.max(squares / losses.length - simulated * simulated, 0);
  return { what, simulated, standardError: Math.sqrt(variance / losses.length), published };
}

/**
 * Those of the comparisons that are over four standard errors apart, beyond half a unit of the last published digit; also those without any error,
 * in which nothing was simulated.
 */
export function apart(comparisons: readonly Compared[], halfUnit = 0): Compared[] {
  return comparisons.filter(({ simulated, standardError, published }) => {
    const off = Math.abs(simulated - published);
    return !(standardError > 0 && off <= 4 * standardError + halfUnit);
  });
}

/** Comparisons of the share of states at each whole loss 0, 1, 2, … with published probabilities. */
export function comparedShares(losses: Float64Array, probabilities: readonly number[], step = 1): Compared[] {
  return probabilities.map((p, k) =>
    compared(`f(${k * step})`, losses, (loss) => (Math.abs(loss - k * step) < 1e-9 ? 1 : 0), p),
  );
}
