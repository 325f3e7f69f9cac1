import type { DataSource } from 'typeorm';
import type { BasisTerms } from '../../api/contract/house';
import type { ProgrammeTermsRecord } from '../../api/domain/programme/programme';
import type { RunInputs } from '../../api/domain/run/run';
import { catalogueColumns, lossColumns, type CatalogueColumns, type LossColumns } from './engine-arrays';

/** A layer of a contract in the book, amounts as numbers in the contract's currency. */
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

export interface WorkContract {
  readonly currency: string;
  readonly lossTableIds: readonly string[];
  readonly layers: readonly WorkLayer[];
}

/** All that a worker needs for a run, read in one repeatable view of the rows that the run froze. */
export interface RunWork {
  readonly terms: ProgrammeTermsRecord;
  readonly states: number;
  readonly basis: BasisTerms;
  readonly catalogues: readonly (CatalogueColumns & { readonly catalogueId: string })[];
  readonly tables: ReadonlyMap<string, LossColumns>;
  readonly contracts: readonly WorkContract[];
}

export function readRunWork(dataSource: DataSource, runId: string): Promise<RunWork> {
  return dataSource.transaction('REPEATABLE READ', async (manager) => {
    const runs: { terms: ProgrammeTermsRecord; states: number; inputs: RunInputs; basis: BasisTerms }[] = await manager.query(
      'SELECT r.terms, r.states, r.inputs, b.terms AS basis FROM runs r JOIN bases b ON b.id = r.basis_id WHERE r.id = $1',
      [runId],
    );
    const run = runs[0];
    if (run === undefined) throw new Error('there is no such run');
    const catalogues: (CatalogueColumns & { catalogueId: string })[] = [];
    for (const { id, ofId } of run.inputs.catalogues) catalogues.push({ catalogueId: ofId, ...(await catalogueColumns(manager, id)) });
    const tables = new Map<string, LossColumns>();
    for (const { id } of [...run.inputs.lossTables, ...run.inputs.bookLossTables]) {
      if (!tables.has(id)) tables.set(id, await lossColumns(manager, id));
    }
    const contracts: WorkContract[] = await manager.query(
      `SELECT k.currency, k.loss_table_ids AS "lossTableIds",
         (SELECT json_agg(json_build_object('key', l.layer_key, 'limit', l.limit_amount::float8, 'attachment', l.attachment::float8,
            'annualDeductible', l.annual_deductible::float8, 'reinstatements', l.reinstatements, 'brokerage', l.brokerage::float8,
            'signedLine', l.signed_line::float8, 'premium', l.premium::float8, 'remainingLimit', l.remaining_limit::float8) ORDER BY l.position)
          FROM contract_layers l WHERE l.contract_id = k.id) AS layers
       FROM contracts k WHERE k.id = ANY($1) ORDER BY k.id`,
      [run.inputs.contractIds],
    );
    return { terms: run.terms, states: run.states, basis: run.basis, catalogues, tables, contracts };
  });
}
