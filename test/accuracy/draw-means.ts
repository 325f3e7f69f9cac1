import { parentPort } from 'node:worker_threads';
import { prepare, type LayerTerms, type LossTable, type ValuationInputs } from '../../worker/engine';
import { Draws, addLosses } from '../../worker/engine/losses/draw';
import { fillLaws, makeLaws } from '../../worker/engine/losses/laws';
import { BLOCK_STATES } from '../../worker/engine/model/inputs';
import { plainMemory } from '../../worker/engine/model/memory';
import { Occurrences, drawOccurrences } from '../../worker/engine/random/occurrences';
import { INVENTED_BASIS, inventedCatalogue, inventedLayer } from '../../worker/engine/testing/invented';
import type { LossMoments } from './layer-moments';
import type { TailLayer } from './tail-laws';

const RATE = 4;

/**
 * How a run draws: a programme's rows for every loss, by their tables of quantiles where they have them; a book's rows
 * only above its lowest attachment; and such rows by the exact quantile, as where few draws are expected.
 */
export type Path = 'programme' | 'book' | 'exact';

/** One law of a loss, and the layers whose mean recovery is wanted. */
export interface DrawCase extends LossMoments {
  readonly path: Path;
  readonly seed: string;
  readonly layers: readonly TailLayer[];
  /** About so many: whole blocks are drawn. */
  readonly draws: number;
}

export interface Drawn {
  readonly draws: number;
  /** Whether the losses came from a table of quantiles. */
  readonly tabled: boolean;
  readonly meanRecovery: readonly number[];
}

/** A run of one event that happens four times a year, with one row of that law for the programme and for the book. */
function inputsOf({ mean, sd, exposed, seed, layers }: DrawCase): ValuationInputs {
  const catalogue = inventedCatalogue(1, RATE);
  const table = (lineage: string): LossTable => ({
    lineage,
    catalogueLineage: catalogue.lineage,
    eventIndex: Int32Array.of(0),
    meanLoss: Float64Array.of(mean),
    sd: Float64Array.of(sd),
    commonShare: Float64Array.of(0.4),
    exposedValue: Float64Array.of(exposed),
    toContractCurrency: 1,
  });
  const terms = layers.map(({ limit, attachment }, l): LayerTerms =>
    inventedLayer(`${l}`, limit, attachment),
  );
  const book = terms.map((layer) => ({ ...layer, premium: 0 }));
  return {
    grid: { seed, states: 1_000_000 },
    catalogues: [catalogue],
    programme: { tables: [table('programme')], layers: terms, inceptionDay: 1, toHouseCurrency: 1 },
    book: [{ tables: [table('book')], layers: book, toHouseCurrency: 1 }],
    basis: INVENTED_BASIS,
  };
}

/** Draws a law as a run does, block by block, and answers each layer's mean recovery. */
function drawn(wanted: DrawCase): Drawn {
  const { path, layers } = wanted;
  const prepared = prepare(inputsOf(wanted));
  const laws = makeLaws(prepared.rows, prepared.tabledRows, plainMemory);
  for (const each of prepared.tables) fillLaws(laws, each, 0, 1);
  const [own] = (path === 'programme' ? prepared.programme : prepared.book[0])?.tables ?? [];
  if (own === undefined) throw new Error('a case has its table');
  const table = path === 'exact' ? { ...own, slot: Int32Array.of(-1) } : own;
  const occurrences = new Occurrences(1);
  const draws = new Draws();
  let losses = new Float64Array(0);
  const sums = new Float64Array(layers.length);
  const blocks = Math.ceil(wanted.draws / (RATE * BLOCK_STATES));
  let count = 0;
  for (let block = 0; block < blocks; block += 1) {
    drawOccurrences(occurrences, prepared.catalogues, block, BLOCK_STATES, 1);
    if (losses.length < occurrences.count) losses = new Float64Array(2 * occurrences.count);
    else losses.fill(0, 0, occurrences.count);
    addLosses(losses, draws, table, laws, occurrences, block);
    layers.forEach(({ limit, attachment }, l) => {
      let sum = 0;
      for (let i = 0; i < occurrences.count; i += 1) {
        const over = (losses[i] ?? 0) - attachment;
        if (over > 0) sum += over < limit ? over : limit;
      }
      sums[l] = (sums[l] ?? 0) + sum;
    });
    count += occurrences.count;
  }
  return {
    draws: count,
    tabled: (table.slot[0] ?? -1) >= 0,
    meanRecovery: Array.from(sums, (sum) => sum / count),
  };
}

parentPort?.on('message', (wanted: DrawCase) => parentPort?.postMessage(drawn(wanted)));
