import type { BasisTerms } from '../../../api/contract/house';
import type { ProgrammeTermsRecord } from '../../../api/domain/programme/programme';

/** Thrown where the worker itself gives the work up, as it does when it stops: no trouble of the run's. */
export class GivenUp extends Error {
  constructor() {
    super('the worker stopped before the run had ended');
    this.name = 'GivenUp';
  }
}

/** Columns as the store reads them; see the reading side for units. */
export interface CatalogueColumns {
  readonly catalogueId: string;
  readonly lineage: string;
  readonly eventNumbers: Int32Array;
  readonly eventNames: readonly string[];
  readonly ratePerYear: Float64Array;
  readonly peril: readonly string[];
  readonly region: readonly string[];
  readonly seasonDay: Float64Array;
  readonly group: readonly (string | null)[];
  readonly varianceToMean: Float64Array;
}

export interface LossColumns {
  readonly lineage: string;
  readonly catalogueId: string;
  readonly currency: string;
  readonly eventNumbers: Int32Array;
  readonly meanLoss: Float64Array;
  readonly sd: Float64Array;
  readonly commonShare: Float64Array;
  readonly exposedValue: Float64Array;
}

export interface WorkLayer {
  readonly key: string;
  readonly limit: number;
  readonly attachment: number;
  readonly annualDeductible: number;
  readonly reinstatements: readonly number[];
  readonly brokerage: number;
  readonly signedLine: number;
  readonly premium: number;
  readonly remainingLimit: number | null;
}

export interface RunWork {
  readonly terms: ProgrammeTermsRecord;
  readonly states: number;
  readonly basis: BasisTerms;
  readonly catalogues: readonly CatalogueColumns[];
  readonly tables: ReadonlyMap<string, LossColumns>;
  readonly contracts: readonly { readonly currency: string; readonly lossTableIds: readonly string[]; readonly layers: readonly WorkLayer[] }[];
}
