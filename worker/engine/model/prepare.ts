import { kindOfRow, severityOfRow } from '../losses/laws';
import { reachOfLayers } from '../layers/counting';
import { streamKey } from '../random/keys';
import { catalogueKeys, type KeyedCatalogue } from '../random/occurrences';
import { checkBasis, checkCatalogue, checkColumns, checkDeductions, checkGrid, checkLayer } from './check';
import { BLOCK_STATES, type BookContract, type HouseBasis, type LossTable, type Programme, type ValuationInputs } from './inputs';
import type { LayerTerms } from './layer';
import { EngineInputError, demand } from './refusal';

/** A loss table ready for drawing: which row an event has, and what its laws are fitted from. */
export interface PreparedTable {
  readonly lineage: string;
  readonly home: KeyedCatalogue;
  readonly firstEvent: number;
  /** Number of its first row, counted through all tables of the run. */
  readonly firstRow: number;
  /** Row of each event of its catalogue, −1 where it has none. */
  readonly rowOfEvent: Int32Array;
  readonly meanLoss: Float64Array;
  readonly sd: Float64Array;
  readonly exposedValue: Float64Array;
  readonly kind: Uint8Array;
  /** √c and √(1 − c) of each row. */
  readonly commonWeight: Float64Array;
  readonly ownWeight: Float64Array;
  readonly key0: Uint32Array;
  readonly key1: Uint32Array;
  /** Place of each row's knots, −1 where it needs none. */
  readonly slot: Int32Array;
  readonly draws: (row: number) => number;
  /** Table currency; below 0: every loss is wanted. */
  readonly lowestAttachment: number;
  readonly toContractCurrency: number;
}

export interface PreparedContract {
  readonly tables: readonly PreparedTable[];
  readonly layers: readonly LayerTerms[];
  /** Premiums for 100%, contract currency; of the programme priced: none. */
  readonly premiums: readonly number[];
  readonly toHouseCurrency: number;
  /** Least ground-up loss, contract currency, that any of the layers can count. */
  readonly reach: number;
}

export interface Prepared {
  readonly inputs: ValuationInputs;
  readonly catalogues: readonly KeyedCatalogue[];
  readonly events: number;
  readonly programme: PreparedContract;
  readonly book: readonly PreparedContract[];
  readonly blocks: number;
  /** Every table of the run, in the order of their first rows. */
  readonly tables: readonly PreparedTable[];
  readonly rows: number;
  /** Rows that may have a table of quantiles. */
  readonly tabledRows: number;
}

/** Premium of a layer of the book; a layer being priced has none. */
function premiumOf(layer: LayerTerms & { readonly premium?: number }): number {
  const { key, premium = 0 } = layer;
  demand(premium >= 0 && premium < Infinity, `Layer ${key}: the premium in the book`, premium, '0 or more');
  return premium;
}

/** What is counted through the tables of a run while they are prepared. */
class Numbering {
  readonly tables: PreparedTable[] = [];
  rows = 0;
  tabled = 0;

  constructor(
    readonly catalogues: readonly KeyedCatalogue[],
    readonly seed: string,
    readonly states: number,
  ) {}

  table(table: LossTable, lowestAttachment: number): PreparedTable {
    const name = `Loss table ${table.lineage}`;
    const home = this.catalogues.find(({ catalogue }) => catalogue.lineage === table.catalogueLineage);
    if (home === undefined) throw new EngineInputError(`${name} rests on a catalogue that the run does not have.`);
    demand(table.toContractCurrency > 0 && table.toContractCurrency < Infinity, `The exchange rate of ${name}`, table.toContractCurrency, 'above 0');
    const n = table.eventIndex.length;
    checkColumns(table);
    const events = home.catalogue.eventNames;
    const rowOfEvent = new Int32Array(events.length).fill(-1);
    const kind = new Uint8Array(n);
    const slot = new Int32Array(n).fill(-1);
    const [commonWeight, ownWeight] = [new Float64Array(n), new Float64Array(n)];
    const [key0, key1] = [new Uint32Array(n), new Uint32Array(n)];
    const draws = (row: number): number => (home.rate[table.eventIndex[row] ?? 0] ?? 0) * this.states;
    for (let row = 0; row < n; row += 1) {
      const event = table.eventIndex[row] ?? -1;
      const eventName = events[event];
      if (eventName === undefined) throw new EngineInputError(`${name} names an event outside its catalogue.`);
      if ((rowOfEvent[event] ?? -1) >= 0) throw new EngineInputError(`${name} names event ${eventName} twice.`);
      rowOfEvent[event] = row;
      const share = table.commonShare[row] ?? 0;
      if (!(share >= 0 && share <= 1)) demand(false, `${name}, event ${eventName}: the common share`, share, 'from 0 to 1');
      const found = kindOfRow(severityOfRow(table, row), draws(row));
      kind[row] = found.kind;
      if (found.mayHaveTable) {
        slot[row] = this.tabled;
        this.tabled += 1;
      }
      commonWeight[row] = Math.sqrt(share);
      ownWeight[row] = Math.sqrt(1 - share);
      const key = streamKey(this.seed, table.lineage, eventName);
      key0[row] = key.key0;
      key1[row] = key.key1;
    }
    const { lineage, meanLoss, sd, exposedValue, toContractCurrency } = table;
    const prepared: PreparedTable = {
      lineage, home, firstEvent: home.firstEvent, firstRow: this.rows, rowOfEvent, meanLoss, sd, exposedValue,
      kind, commonWeight, ownWeight, key0, key1, slot, draws, lowestAttachment: lowestAttachment / toContractCurrency, toContractCurrency,
    };
    this.rows += n;
    this.tables.push(prepared);
    return prepared;
  }

  contract(contract: Programme | BookContract, basis: HouseBasis, everyLoss: boolean): PreparedContract {
    const { layers, tables } = contract;
    demand(layers.length > 0, 'The number of layers of a contract', layers.length, 'above 0');
    demand(contract.toHouseCurrency > 0 && contract.toHouseCurrency < Infinity, 'The exchange rate of a contract', contract.toHouseCurrency, 'above 0');
    for (const layer of layers) {
      checkLayer(layer);
      checkDeductions(layer, basis);
    }
    const reach = reachOfLayers(layers);
    // Losses below every layer need not be drawn, unless several tables are summed before the layers see them.
    const summed = new Set(tables.map((table) => table.catalogueLineage)).size < tables.length;
    return {
      tables: tables.map((table) => this.table(table, everyLoss || summed ? -1 : reach)),
      layers,
      premiums: layers.map(premiumOf),
      toHouseCurrency: contract.toHouseCurrency,
      reach,
    };
  }
}

/**
 * Checks the inputs and makes what every block needs.
 * @throws EngineInputError in words fit for a person
 */
export function prepare(inputs: ValuationInputs): Prepared {
  const { grid, basis, programme } = inputs;
  checkGrid(grid);
  demand(programme.inceptionDay >= 1 && programme.inceptionDay <= 366, 'The day of inception', programme.inceptionDay, 'from 1 to 366');
  checkBasis(basis);
  let events = 0;
  const catalogues = inputs.catalogues.map((catalogue): KeyedCatalogue => {
    checkCatalogue(catalogue);
    const { ratePerYear, rateFactor } = catalogue;
    const rate = rateFactor === undefined ? ratePerYear : ratePerYear.map((own, i) => own * (rateFactor[i] ?? 1));
    const keyed = { catalogue, keys: catalogueKeys(catalogue, grid.seed), firstEvent: events, rate };
    events += catalogue.eventNames.length;
    return keyed;
  });
  if (new Set(inputs.catalogues.map((c) => c.lineage)).size < catalogues.length) throw new EngineInputError('A run uses one version of a catalogue.');
  const numbering = new Numbering(catalogues, grid.seed, grid.states);
  return {
    inputs,
    catalogues,
    events,
    programme: numbering.contract(programme, basis, true),
    book: inputs.book.map((contract) => numbering.contract(contract, basis, false)),
    blocks: Math.floor((grid.states + BLOCK_STATES - 1) / BLOCK_STATES),
    tables: numbering.tables,
    rows: numbering.rows,
    tabledRows: numbering.tabled,
  };
}
