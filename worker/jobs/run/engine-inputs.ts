import type { BasisTerms } from '../../../api/contract/house';
import { EngineInputError, type BookContract, type Catalogue, type HouseBasis, type LossTable, type ValuationInputs } from '../../engine';
import type { CatalogueColumns, LossColumns, RunWork } from './port';

function numbered(names: readonly string[]): { distinct: string[]; index: Uint16Array } {
  const distinct = [...new Set(names)];
  const places = new Map(distinct.map((name, i) => [name, i]));
  return { distinct, index: Uint16Array.from(names, (name) => places.get(name) ?? 0) };
}

function catalogueOf(columns: CatalogueColumns): Catalogue {
  const perils = numbered(columns.peril);
  const regions = numbered(columns.region);
  const groups = new Map<string, number>();
  columns.group.forEach((group, i) => {
    const ratio = columns.varianceToMean[i] ?? Number.NaN;
    if (group !== null && ratio > 1) groups.set(group, ratio);
  });
  const names = [...groups.keys()];
  return {
    lineage: columns.lineage,
    eventNames: columns.eventNames,
    ratePerYear: columns.ratePerYear,
    perils: perils.distinct,
    perilIndex: perils.index,
    regions: regions.distinct,
    regionIndex: regions.index,
    seasonDay: columns.seasonDay,
    groups: [...groups].map(([name, varianceToMean]) => ({ name, varianceToMean })),
    groupIndex: Int32Array.from(columns.group, (group) => (group === null ? -1 : names.indexOf(group))),
  };
}

function rateOf(basis: BasisTerms, currency: string): number {
  const rate = currency === basis.currency ? 1 : basis.exchangeRates[currency];
  if (rate === undefined) throw new EngineInputError(`The basis has no rate of exchange for ${currency}.`);
  return rate;
}

/** A loss table on its catalogue: rows whose events this version of the catalogue lacks are left out. */
function tableOf(columns: LossColumns, work: RunWork, rows: ReadonlyMap<string, ReadonlyMap<number, number>>, contractCurrency: string): LossTable {
  const catalogue = work.catalogues.find(({ catalogueId }) => catalogueId === columns.catalogueId);
  const rowOf = rows.get(columns.catalogueId);
  if (catalogue === undefined || rowOf === undefined) throw new EngineInputError(`Loss table ${columns.lineage} rests on a catalogue that the run does not have.`);
  const kept: number[] = [];
  columns.eventNumbers.forEach((event, i) => {
    if (rowOf.has(event)) kept.push(i);
  });
  const pick = (values: Float64Array): Float64Array => Float64Array.from(kept, (i) => values[i] ?? 0);
  return {
    lineage: columns.lineage,
    catalogueLineage: catalogue.lineage,
    eventIndex: Int32Array.from(kept, (i) => rowOf.get(columns.eventNumbers[i] ?? -1) ?? -1),
    meanLoss: pick(columns.meanLoss),
    sd: pick(columns.sd),
    commonShare: pick(columns.commonShare),
    exposedValue: pick(columns.exposedValue),
    toContractCurrency: rateOf(work.basis, columns.currency) / rateOf(work.basis, contractCurrency),
  };
}

function dayOfYear(isoDate: string): number {
  const [, month = 1, day = 1] = isoDate.split('-').map(Number);
  // Seasons count 365 days: the leap day falls on the first of March.
  return Math.min(365, 1 + Math.round((Date.UTC(2001, month - 1, day) - Date.UTC(2001, 0, 1)) / 86_400_000));
}

function houseOf(basis: BasisTerms): HouseBasis {
  const { capital, riskAversion, discounting, returnOnAssets, floor, targetMargin, minimumRateOnLine } = basis;
  const { taxes, variableExpense, lossAdjustment, fixedExpensePerContract, attritionalAndOutward } = basis;
  return {
    capital, riskAversion, discounting, returnOnAssets, floor, targetMargin, minimumRateOnLine,
    taxes, variableExpense, lossAdjustment, fixedExpensePerContract, attritionalAndOutward,
  };
}

/** Turns what a run froze into what the engine values. */
export function engineInputs(work: RunWork): ValuationInputs {
  const rows = new Map(
    work.catalogues.map((catalogue) => [catalogue.catalogueId, new Map(Array.from(catalogue.eventNumbers, (event, row) => [event, row]))]),
  );
  const tables = (ids: readonly string[], currency: string): LossTable[] =>
    ids.map((id) => {
      const columns = work.tables.get(id);
      if (columns === undefined) throw new EngineInputError('A loss table of the run is missing.');
      return tableOf(columns, work, rows, currency);
    });
  const book = work.contracts.map(
    (contract): BookContract => ({
      tables: tables(contract.lossTableIds, contract.currency),
      layers: contract.layers.map(({ signedLine, remainingLimit, ...layer }) => ({
        ...layer,
        line: signedLine,
        ...(remainingLimit === null ? {} : { annualLimit: remainingLimit }),
      })),
      toHouseCurrency: rateOf(work.basis, contract.currency),
    }),
  );
  return {
    grid: { seed: work.basis.grid.seed, states: work.states },
    catalogues: work.catalogues.map(catalogueOf),
    programme: {
      tables: tables(work.terms.lossTableIds, work.terms.currency),
      layers: work.terms.layers.map((layer) => ({
        key: layer.key,
        limit: Number(layer.limit),
        attachment: Number(layer.attachment),
        annualDeductible: Number(layer.annualDeductible),
        reinstatements: layer.reinstatements,
        line: layer.writtenLine,
        brokerage: layer.brokerage,
      })),
      inceptionDay: dayOfYear(work.terms.inceptionOn),
      toHouseCurrency: rateOf(work.basis, work.terms.currency),
    },
    book,
    basis: houseOf(work.basis),
  };
}
