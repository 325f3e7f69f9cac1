import type { DemoCatalogue, DemoContract, DemoLossTable, DemoScenario } from '../../fixtures/demo/scenario';
import type { BookContract, Catalogue, LossTable, ValuationInputs } from '../../worker/engine';

function catalogueOf(demo: DemoCatalogue): Catalogue {
  const perils = [...new Set(demo.events.map(({ peril }) => peril))];
  const regions = [...new Set(demo.events.map(({ region }) => region))];
  return {
    lineage: demo.lineage,
    eventNames: demo.events.map(({ event }) => event),
    ratePerYear: Float64Array.from(demo.events, ({ ratePerYear }) => ratePerYear),
    perils,
    perilIndex: Uint16Array.from(demo.events, ({ peril }) => perils.indexOf(peril)),
    regions,
    regionIndex: Uint16Array.from(demo.events, ({ region }) => regions.indexOf(region)),
    seasonDay: Float64Array.from(demo.events, ({ seasonDay }) => seasonDay ?? Number.NaN),
    groups: [],
    groupIndex: new Int32Array(demo.events.length).fill(-1),
  };
}

function tableOf(demo: DemoLossTable, lineage: string, places: ReadonlyMap<string, number>): LossTable {
  return {
    lineage,
    catalogueLineage: demo.catalogue,
    eventIndex: Int32Array.from(demo.rows, ({ event }) => places.get(event) ?? -1),
    meanLoss: Float64Array.from(demo.rows, ({ meanLoss }) => meanLoss),
    sd: Float64Array.from(demo.rows, ({ sd }) => sd),
    commonShare: Float64Array.from(demo.rows, ({ commonShare }) => commonShare),
    exposedValue: Float64Array.from(demo.rows, ({ exposedValue }) => exposedValue),
    toContractCurrency: 1,
  };
}

/** What a run would value when a contract of the demo's book is renewed on its expiring terms: the book without it, its losses under a new lineage. */
export function renewalInputs(demo: DemoScenario, renewed: DemoContract, states: number): ValuationInputs {
  const { currency, risklessRate, exchangeRates, seed, states: _offered, ...basis } = demo.basis;
  const places = new Map(
    demo.catalogues.map(({ lineage, events }) => [
      lineage,
      new Map(events.map(({ event }, i) => [event, i])),
    ]),
  );
  const tables = (contract: DemoContract, suffix = ''): LossTable[] =>
    contract.lossTables.map((lineage) => {
      const table = demo.lossTables.find((one) => one.lineage === lineage);
      const events = places.get(table?.catalogue ?? '');
      if (table === undefined || events === undefined)
        throw new Error(`the demo has no loss table ${lineage}`);
      return tableOf(table, `${lineage}${suffix}`, events);
    });
  const toHouseCurrency = (contract: DemoContract): number =>
    contract.currency === currency ? 1 : (exchangeRates[contract.currency] ?? Number.NaN);
  const bookContract = (contract: DemoContract): BookContract => ({
    tables: tables(contract),
    toHouseCurrency: toHouseCurrency(contract),
    layers: contract.layers.map(({ name: _name, remainingLimit, ...layer }) => ({
      ...layer,
      ...(remainingLimit === null ? {} : { annualLimit: remainingLimit }),
    })),
  });
  return {
    grid: { seed, states },
    catalogues: demo.catalogues.map(catalogueOf),
    programme: {
      tables: tables(renewed, '-2027'),
      layers: renewed.layers.map(
        ({ name: _name, remainingLimit: _left, premium: _premium, ...layer }) => layer,
      ),
      inceptionDay: 1,
      toHouseCurrency: toHouseCurrency(renewed),
    },
    book: demo.book.filter((contract) => contract !== renewed).map(bookContract),
    basis: { ...basis, discounting: { mode: 'anchored', risklessRate }, returnOnAssets: null },
  };
}
