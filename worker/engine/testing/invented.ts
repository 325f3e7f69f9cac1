import type { BookContract, Catalogue, HouseBasis, LayerTerms, LossTable, ValuationInputs } from '../model/inputs';

/** A small generator for invented inputs (G. Marsaglia, Xorshift RNGs, 2003); nothing of a price rests on it. */
function generator(seed: number): () => number {
  let x = seed | 1;
  return () => {
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    return ((x >>> 0) + 0.5) / 4_294_967_296;
  };
}

export function inventedCatalogue(events: number, ratePerYear: number, lineage = 'invented-wind'): Catalogue {
  const next = generator(11);
  const raw = Float64Array.from({ length: events }, () => 0.05 + next());
  const sum = raw.reduce((a, b) => a + b, 0);
  return {
    lineage,
    eventNames: Array.from({ length: events }, (_unused, i) => `event ${i}`),
    ratePerYear: raw.map((r) => (r / sum) * ratePerYear),
    perils: ['wind', 'storm flood'],
    perilIndex: Uint16Array.from({ length: events }, () => (next() < 0.7 ? 0 : 1)),
    regions: ['north', 'south', 'east'],
    regionIndex: Uint16Array.from({ length: events }, () => Math.floor(next() * 3)),
    seasonDay: Float64Array.from({ length: events }, () => (next() < 0.5 ? Number.NaN : 1 + Math.floor(next() * 365))),
    groups: [],
    groupIndex: new Int32Array(events).fill(-1),
  };
}

/** Losses on a share of the events, heavy-tailed over events, beta with a few lognormal and certain ones. */
export function inventedTable(catalogue: Catalogue, lineage: string, size: number, share: number, seed: number): LossTable {
  const next = generator(seed);
  const rows = catalogue.eventNames.map((_name, i) => i).filter(() => next() < share);
  const exposed = rows.map(() => (next() < 0.9 ? size * (5 + 20 * next()) : Number.NaN));
  const mean = rows.map((_row, r) => {
    const drawn = size * 0.02 * (1 / Math.sqrt(next()) - 0.99);
    const most = exposed[r] ?? Number.NaN;
    return most === most ? Math.min(drawn, 0.5 * most) : drawn;
  });
  return {
    lineage,
    catalogueLineage: catalogue.lineage,
    eventIndex: Int32Array.from(rows),
    meanLoss: Float64Array.from(mean),
    sd: Float64Array.from(mean, (m, r) => {
      const most = exposed[r] ?? Number.NaN;
      const wanted = next() < 0.02 ? 0 : m * (0.3 + 1.2 * next());
      return most === most ? Math.min(wanted, 0.8 * Math.sqrt(m * (most - m))) : wanted;
    }),
    commonShare: Float64Array.from(rows, () => 0.2 + 0.6 * next()),
    exposedValue: Float64Array.from(exposed),
    toContractCurrency: 1,
  };
}

export function inventedLayer(key: string, limit: number, attachment: number, over: Partial<LayerTerms> = {}): LayerTerms {
  return { key, limit, attachment, annualDeductible: 0, reinstatements: [1], line: 0.1, brokerage: 0.1, ...over };
}

export const INVENTED_BASIS: HouseBasis = {
  capital: 1000,
  riskAversion: 6,
  discounting: { mode: 'anchored', risklessRate: 0.03 },
  returnOnAssets: null,
  floor: 0.25,
  targetMargin: 0.08,
  minimumRateOnLine: 0.01,
  taxes: 0.01,
  variableExpense: 0.02,
  lossAdjustment: 0.02,
  fixedExpensePerContract: 0.02,
  attritionalAndOutward: 10,
};

export interface InventedSize {
  readonly events: number;
  readonly states: number;
  readonly contracts: number;
  readonly layers: number;
}

/** A whole run of invented inputs. */
export function inventedInputs({ events, states, contracts, layers }: InventedSize): ValuationInputs {
  const catalogue = inventedCatalogue(events, 2.5);
  const book: BookContract[] = Array.from({ length: contracts }, (_unused, c) => ({
    tables: [inventedTable(catalogue, `book-${c}`, 50, 0.3, 100 + c)],
    layers: [3, 6, 12, 25].map((a) => ({ ...inventedLayer(`xs${a}`, a, a), premium: a * 0.1 })),
    toHouseCurrency: 1,
  }));
  const tower = Array.from({ length: layers }, (_unused, l) => 2 * (l + 1) * (l + 1));
  return {
    grid: { seed: '00112233445566ff', states },
    catalogues: [catalogue],
    programme: {
      tables: [inventedTable(catalogue, 'programme', 80, 0.5, 7)],
      layers: tower.map((a, l) => inventedLayer(`layer-${l + 1}`, (tower[l + 1] ?? a * 1.3) - a, a)),
      inceptionDay: 1,
      toHouseCurrency: 1,
    },
    book,
    basis: INVENTED_BASIS,
  };
}
