import type { BookContract, Catalogue, HouseBasis, LossTable, ValuationInputs } from '../model/inputs';
import type { LayerForm, LayerTerms } from '../model/layer';
import { INVENTED_BASIS, inventedCatalogue, inventedLayer, inventedTable } from './invented';

/** Chance for what is drawn from all over a domain (G. Marsaglia, Xorshift RNGs, 2003). */
class Chance {
  private x: number;

  constructor(seed: number) {
    this.x = Math.imul(seed, 0x9e3779b1) ^ 0x5bd1e995 || 1;
    for (let i = 0; i < 8; i += 1) this.next();
  }

  next(): number {
    this.x ^= this.x << 13;
    this.x ^= this.x >>> 17;
    this.x ^= this.x << 5;
    return ((this.x >>> 0) + 0.5) / 4_294_967_296;
  }

  of<A>(...items: readonly [A, ...A[]]): A {
    return items[Math.floor(this.next() * items.length)] ?? items[0];
  }

  between(least: number, most: number): number {
    return least + this.next() * (most - least);
  }

  /** From small to large, small ones more often: of every power of ten about as many. */
  orders(least: number, decades: number): number {
    let x = least * this.between(1, 10);
    for (let d = Math.floor(this.next() * decades); d > 0; d -= 1) x *= 10;
    return x;
  }
}

function form(chance: Chance): LayerForm {
  const threshold = chance.of(0, chance.orders(0.1, 2));
  switch (chance.of('excess', 'excess', 'excess', 'aggregate', 'nth event')) {
    case 'aggregate':
      return {
        kind: 'aggregate',
        threshold,
        counts: chance.of('in full', 'over it'),
        cap: chance.of(null, 11, 1e6),
      };
    case 'nth event':
      return { kind: 'nth event', first: chance.of(1, 2, 3), qualifying: threshold };
    default:
      return { kind: 'excess' };
  }
}

function layer(chance: Chance, key: string): LayerTerms {
  const counts = form(chance);
  const unlimited = chance.of(null, null, 0, 1);
  const reinstated = counts.kind !== 'aggregate';
  const limit = chance.of(1e-9, 1e12, ...Array.from({ length: 6 }, () => chance.orders(0.1, 3)));
  const attachment = chance.of(0, 0, 1e12, ...Array.from({ length: 6 }, () => chance.orders(0.1, 2)));
  const paid = chance.of<readonly number[]>([], [0], [1], [1, 0.5], [1.25, 1.5, 2]);
  return inventedLayer(key, limit, attachment, {
    form: counts,
    annualDeductible: chance.of(0, 0, 0.7),
    reinstatements: reinstated && unlimited === null ? paid : [],
    ...(reinstated && unlimited !== null ? { unlimitedReinstatementsAt: unlimited } : {}),
    reinstatedProRataTime: chance.of(true, false),
    annualLimit: chance.of(Infinity, Infinity, 4, 1e-6),
    quotaShareKept: chance.of(1, 1, 0.5, 1e-3),
    inuringCovers: chance.of([], [], [{ limit: 2, attachment: 1, annualLimit: 3 }]),
    line: chance.of(0.1, 0.3, 1, 1 - 1e-12, 1e-3, 1e-9),
    brokerage: chance.of(0, 0.1, 0.3),
    brokerageOnReinstatements: chance.of(true, false),
  });
}

function basis(chance: Chance): HouseBasis {
  return {
    ...INVENTED_BASIS,
    // The book loses up to a few hundred: from a house that it ruins to one that never feels it.
    capital: chance.of(
      chance.orders(0.1, 4),
      chance.orders(10, 1),
      chance.orders(10, 1),
      chance.orders(1e3, 9),
    ),
    riskAversion: chance.of(0, 0.5, 1, 1 + 1e-9, 2, 15, 30, chance.between(0, 30)),
    discounting: chance.of<HouseBasis['discounting']>(
      { mode: 'anchored', risklessRate: chance.of(0, 0.03, -0.02, 0.5) },
      { mode: 'anchored', risklessRate: 0.03 },
      { mode: 'stated', discountFactor: chance.of(0.95, 0.8, 1) },
    ),
    returnOnAssets: chance.of(null, null, 0, 0.1, -0.3),
    floor: chance.of(0.25, 0.25, 0.999, 0.05, 1e-3, 1e-6),
    targetMargin: chance.of(0, 0.08),
    minimumRateOnLine: chance.of(0, 0.01),
    lossAdjustment: chance.of(0, 0.02),
    fixedExpensePerContract: chance.of(0, 0.02, 5),
    attritionalAndOutward: chance.of(0, 1, -3),
  };
}

/** A table whose rows have severities of every kind, from none at all to the most skewed. */
function reshaped(chance: Chance, table: LossTable, toContractCurrency: number): LossTable {
  const kinds = Array.from(table.meanLoss, () =>
    chance.of(
      'none',
      'certain',
      'lognormal',
      'skewed lognormal',
      'beta',
      'beta near its bound',
      'beta near certain',
    ),
  );
  const meanLoss = table.meanLoss.map((mean, r) => (kinds[r] === 'none' ? 0 : mean + 1e-9));
  const exposedValue = meanLoss.map((mean, r) =>
    kinds[r]?.startsWith('beta') === true ? mean * chance.of(1.001, 20, 2000) : Number.NaN,
  );
  const sd = meanLoss.map((mean, r) => {
    const most = Math.sqrt(mean * ((exposedValue[r] ?? 0) - mean));
    switch (kinds[r]) {
      case 'lognormal':
        return 0.7 * mean;
      case 'skewed lognormal':
        return 300 * mean;
      case 'beta':
        return 0.4 * most;
      case 'beta near its bound':
        return 0.9999 * most;
      case 'beta near certain':
        return 1e-3 * most;
      default:
        return 0;
    }
  });
  return { ...table, meanLoss, sd, exposedValue, toContractCurrency };
}

const EVENTS = 72;

/** Inputs from all over the domain, small in events and states; the seed names them. */
export function extremeInputs(seed: number): ValuationInputs {
  const chance = new Chance(seed);
  const varianceToMean = chance.of(null, null, 1.000001, 2, 40);
  // Years that vary wildly are drawn from many more points than they keep.
  const rate = chance.orders(varianceToMean === 40 ? 0.01 : 0.05, 1.5);
  const catalogue: Catalogue = {
    ...inventedCatalogue(EVENTS, Math.min(rate, 2)),
    groups: varianceToMean === null ? [] : [{ name: 'storms', varianceToMean }],
    groupIndex: Int32Array.from({ length: EVENTS }, (_unused, e) =>
      varianceToMean !== null && e % 3 > 0 ? 0 : -1,
    ),
  };
  const size = chance.of(1, 1, 1e-3);
  const exchange = chance.of(1, 1, 0.01, 120);
  const book: BookContract = {
    tables: [inventedTable(catalogue, 'book', 80, 0.9, 5)],
    layers: [{ ...inventedLayer('book', 60, 1), line: 1, premium: 6 }],
    toHouseCurrency: 1,
  };
  return {
    grid: { seed: '00112233445566ff', states: 1000 },
    catalogues: [catalogue],
    programme: {
      tables: Array.from({ length: chance.of(1, 1, 2) }, (_unused, t) =>
        reshaped(chance, inventedTable(catalogue, `programme-${t}`, 80 * size, 0.9, 7 + t), exchange / size),
      ),
      layers: Array.from({ length: chance.of(1, 2, 3) }, (_unused, l) => layer(chance, `extreme-${l}`)),
      inceptionDay: chance.of(1, 200, 366),
      toHouseCurrency: chance.of(1, 0.5),
    },
    book: chance.of([], [book]),
    basis: basis(chance),
  };
}
