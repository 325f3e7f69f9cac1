import type { LayerTerms } from './layer';

export type { InuringCover, LayerForm, LayerTerms } from './layer';
export { EngineInputError } from './refusal';

/** States in a block: the unit of work and of joining, fixed for ever because partial sums depend on it. */
export const BLOCK_STATES = 16_384;

/** An event catalogue: `n` events, all arrays of that length. */
export interface Catalogue {
  /** Stable name of the catalogue and all its versions; keys the random numbers. */
  readonly lineage: string;
  readonly eventNames: readonly string[];
  /** Poisson rate of each event, a year, above 0. */
  readonly ratePerYear: Float64Array;
  /** Factor on each event's rate, above 0, kept apart from the catalogue: a group's shape stays that of the catalogue's own rates. */
  readonly rateFactor?: Float64Array;
  readonly perils: readonly string[];
  /** Index into `perils` of each event. */
  readonly perilIndex: Uint16Array;
  readonly regions: readonly string[];
  readonly regionIndex: Uint16Array;
  /** Day of the calendar year, 1 to 365, on which the event happens; NaN: any day alike. */
  readonly seasonDay: Float64Array;
  readonly groups: readonly EventGroup[];
  /** Index into `groups`, or −1. */
  readonly groupIndex: Int32Array;
}

/** Events whose yearly counts vary together: negative binomial with this ratio of variance to mean, above 1. */
export interface EventGroup {
  readonly name: string;
  readonly varianceToMean: number;
}

/** Losses of one portfolio by event: `n` rows, all arrays of that length. */
export interface LossTable {
  /** Stable name of the table and all its versions; keys its own part of the severity score. */
  readonly lineage: string;
  readonly catalogueLineage: string;
  /** Row of the catalogue of each event; rows whose event the catalogue lacks are left out before. */
  readonly eventIndex: Int32Array;
  /** Mean loss given the event, table currency, 0 or more. */
  readonly meanLoss: Float64Array;
  /** Standard deviation of the loss, table currency. */
  readonly sd: Float64Array;
  /** Share of the score's variance that all tables have in common, 0 to 1. */
  readonly commonShare: Float64Array;
  /** Most that can be lost, table currency; NaN: no such bound, the loss is lognormal. */
  readonly exposedValue: Float64Array;
  /** Units of the contract's currency for one unit of the table's. */
  readonly toContractCurrency: number;
}

export interface Programme {
  readonly tables: readonly LossTable[];
  readonly layers: readonly LayerTerms[];
  /** Day of the calendar year, 1 to 365, on which cover incepts. */
  readonly inceptionDay: number;
  /** Units of house currency for one unit of the contract's. */
  readonly toHouseCurrency: number;
}

/** A contract of the book: as a programme, with the premium agreed for 100% of each layer, contract currency. */
export interface BookContract {
  readonly tables: readonly LossTable[];
  readonly layers: readonly (LayerTerms & { readonly premium: number })[];
  readonly toHouseCurrency: number;
}

/** What the house prices on; amounts in house currency, shares and rates as fractions of 1. */
export interface HouseBasis {
  readonly capital: number;
  readonly riskAversion: number;
  readonly discounting:
    | { readonly mode: 'anchored'; readonly risklessRate: number }
    | { readonly mode: 'stated'; readonly discountFactor: number };
  /** Return on own assets; null: the riskless rate. */
  readonly returnOnAssets: number | null;
  /** Capital share below which utility goes on as a straight line, 0 to 1. */
  readonly floor: number;
  readonly targetMargin: number;
  readonly minimumRateOnLine: number;
  readonly taxes: number;
  readonly variableExpense: number;
  readonly lossAdjustment: number;
  readonly fixedExpensePerContract: number;
  readonly attritionalAndOutward: number;
}

export interface Grid {
  /** Sixteen hexadecimal digits. */
  readonly seed: string;
  readonly states: number;
}

export interface ValuationInputs {
  readonly grid: Grid;
  readonly catalogues: readonly Catalogue[];
  readonly programme: Programme;
  readonly book: readonly BookContract[];
  readonly basis: HouseBasis;
}
