import { scoreAbove, severityOf, type Severity } from '../losses/severity';
import { catalogueKeys, type KeyedCatalogue } from '../random/occurrences';
import { streamKey } from '../random/keys';
import {
  BLOCK_STATES,
  EngineInputError,
  type BookContract,
  type Catalogue,
  type HouseBasis,
  type LayerTerms,
  type LossTable,
  type Programme,
  type ValuationInputs,
} from './inputs';

/** A loss table ready for drawing: what each of its rows needs, and which row an event has. */
export interface PreparedTable {
  readonly firstEvent: number;
  /** Row of each event of its catalogue, −1 where it has none that matters. */
  readonly rowOfEvent: Int32Array;
  readonly severities: readonly Severity[];
  readonly commonWeight: Float64Array;
  readonly ownWeight: Float64Array;
  /** Score above which a row's loss exceeds the lowest attachment; −Infinity where every loss is wanted. */
  readonly scoreThreshold: Float64Array;
  readonly key0: Uint32Array;
  readonly key1: Uint32Array;
  readonly toContractCurrency: number;
}

export interface PreparedContract {
  readonly tables: readonly PreparedTable[];
  readonly layers: readonly LayerTerms[];
  /** Premiums for 100%, contract currency; of the programme priced: none. */
  readonly premiums: readonly number[];
  readonly toHouseCurrency: number;
}

export interface Prepared {
  readonly inputs: ValuationInputs;
  readonly catalogues: readonly KeyedCatalogue[];
  readonly programme: PreparedContract;
  readonly book: readonly PreparedContract[];
  readonly blocks: number;
}

function demand(condition: boolean, message: string): void {
  if (!condition) throw new EngineInputError(message);
}

function checkCatalogue(catalogue: Catalogue): void {
  const n = catalogue.eventNames.length;
  demand(n > 0, `Catalogue ${catalogue.lineage} has no events.`);
  for (const array of [catalogue.ratePerYear, catalogue.perilIndex, catalogue.regionIndex, catalogue.seasonDay, catalogue.groupIndex]) {
    demand(array.length === n, `Catalogue ${catalogue.lineage} has columns of different lengths.`);
  }
  for (const rate of catalogue.ratePerYear) demand(rate > 0 && rate < Infinity, `Catalogue ${catalogue.lineage} has a rate that is not above 0.`);
  for (const group of catalogue.groups) demand(group.varianceToMean > 1, `Group ${group.name} needs a ratio of variance to mean above 1.`);
}

function checkLayer(layer: LayerTerms): void {
  demand(layer.limit > 0 && layer.limit < Infinity, `Layer ${layer.key}: the limit must be above 0.`);
  demand(layer.attachment >= 0 && layer.attachment < Infinity, `Layer ${layer.key}: the attachment must be 0 or more.`);
  demand(layer.annualDeductible >= 0 && layer.annualDeductible < Infinity, `Layer ${layer.key}: the annual deductible must be 0 or more.`);
  demand(layer.line > 0 && layer.line <= 1, `Layer ${layer.key}: the line must be above 0% and 100% at most.`);
  demand(layer.brokerage >= 0 && layer.brokerage < 1, `Layer ${layer.key}: the brokerage must be between 0% and 100%.`);
  for (const price of layer.reinstatements) demand(price >= 0 && price < Infinity, `Layer ${layer.key}: a reinstatement costs 0% or more.`);
}

function checkBasis(basis: HouseBasis): void {
  demand(basis.capital > 0 && basis.capital < Infinity, 'The house needs a capital above 0.');
  demand(basis.riskAversion >= 0 && basis.riskAversion < Infinity, 'Risk aversion must be 0 or more.');
  demand(basis.floor > 0 && basis.floor <= 1, 'The floor must be above 0 and 1 at most.');
  demand(basis.taxes + basis.variableExpense < 1, 'Taxes and variable expense leave nothing of the premium.');
}

function prepareTable(table: LossTable, catalogues: readonly KeyedCatalogue[], seed: string, lowestAttachment: number): PreparedTable {
  const home = catalogues.find(({ catalogue }) => catalogue.lineage === table.catalogueLineage);
  if (home === undefined) throw new EngineInputError(`Loss table ${table.lineage} rests on a catalogue that the run does not have.`);
  const n = table.eventIndex.length;
  const events = home.catalogue.eventNames;
  const rowOfEvent = new Int32Array(events.length).fill(-1);
  const severities: Severity[] = [];
  const commonWeight = new Float64Array(n);
  const ownWeight = new Float64Array(n);
  const scoreThreshold = new Float64Array(n);
  const key0 = new Uint32Array(n);
  const key1 = new Uint32Array(n);
  for (let row = 0; row < n; row += 1) {
    const event = table.eventIndex[row] ?? -1;
    const name = events[event];
    if (name === undefined) throw new EngineInputError(`Loss table ${table.lineage} names an event outside its catalogue.`);
    demand((rowOfEvent[event] ?? -1) < 0, `Loss table ${table.lineage} names event ${name} twice.`);
    const share = table.commonShare[row] ?? 0;
    demand(share >= 0 && share <= 1, `Loss table ${table.lineage}, event ${name}: the common share must be between 0 and 1.`);
    const severity = severityOf(table.meanLoss[row] ?? 0, table.sd[row] ?? 0, table.exposedValue[row] ?? Number.NaN);
    const threshold = lowestAttachment < 0 ? -Infinity : scoreAbove(severity, lowestAttachment / table.toContractCurrency);
    severities.push(severity);
    scoreThreshold[row] = threshold;
    commonWeight[row] = Math.sqrt(share);
    ownWeight[row] = Math.sqrt(1 - share);
    const key = streamKey(seed, table.lineage, name);
    key0[row] = key.key0;
    key1[row] = key.key1;
    if (threshold < Infinity) rowOfEvent[event] = row;
  }
  return { firstEvent: home.firstEvent, rowOfEvent, severities, commonWeight, ownWeight, scoreThreshold, key0, key1, toContractCurrency: table.toContractCurrency };
}

/** Losses below every attachment need not be drawn, unless several tables are summed before the layers see them. */
function lowestAttachmentOf(contract: { tables: readonly LossTable[]; layers: readonly LayerTerms[] }): number {
  const lineages = contract.tables.map((table) => table.catalogueLineage);
  return new Set(lineages).size < lineages.length ? -1 : Math.min(...contract.layers.map((layer) => layer.attachment));
}

function prepareContract(contract: Programme | BookContract, catalogues: readonly KeyedCatalogue[], seed: string, everyLoss: boolean): PreparedContract {
  demand(contract.layers.length > 0, 'A contract needs at least one layer.');
  demand(contract.toHouseCurrency > 0 && contract.toHouseCurrency < Infinity, 'A contract needs an exchange rate above 0.');
  contract.layers.forEach(checkLayer);
  const lowest = everyLoss ? -1 : lowestAttachmentOf(contract);
  return {
    tables: contract.tables.map((table) => prepareTable(table, catalogues, seed, lowest)),
    layers: contract.layers,
    premiums: contract.layers.map((layer) => ('premium' in layer && typeof layer.premium === 'number' ? layer.premium : 0)),
    toHouseCurrency: contract.toHouseCurrency,
  };
}

/**
 * Checks the inputs and makes what every block needs.
 * @throws EngineInputError in words fit for a person
 */
export function prepare(inputs: ValuationInputs): Prepared {
  const { grid, basis, programme } = inputs;
  demand(/^[0-9a-f]{16}$/.test(grid.seed), 'The seed must be sixteen hexadecimal digits.');
  demand(Number.isInteger(grid.states) && grid.states >= 1000 && grid.states <= 10_000_000, 'A grid has 1,000 to 10,000,000 states.');
  demand(programme.inceptionDay >= 1 && programme.inceptionDay <= 366, 'Inception must be a day of the year.');
  checkBasis(basis);
  let firstEvent = 0;
  const catalogues = inputs.catalogues.map((catalogue) => {
    checkCatalogue(catalogue);
    const keyed = { catalogue, keys: catalogueKeys(catalogue, grid.seed), firstEvent };
    firstEvent += catalogue.eventNames.length;
    return keyed;
  });
  demand(new Set(inputs.catalogues.map((c) => c.lineage)).size === catalogues.length, 'A run uses one version of a catalogue.');
  return {
    inputs,
    catalogues,
    programme: prepareContract(programme, catalogues, grid.seed, true),
    book: inputs.book.map((contract) => prepareContract(contract, catalogues, grid.seed, false)),
    blocks: Math.floor((grid.states + BLOCK_STATES - 1) / BLOCK_STATES),
  };
}
