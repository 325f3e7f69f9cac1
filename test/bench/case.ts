import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { ValuationInputs } from '../../worker/engine';
import { INVENTED_BASIS, inventedCatalogue, inventedLayer, inventedTable } from '../../worker/engine/testing/invented';

export interface CaseSize {
  readonly events: number;
  readonly states: number;
  readonly layers: number;
}

/** The size that README's table speaks of. */
export const WHOLE: CaseSize = { events: 20_000, states: 1_000_000, layers: 10 };

const OCCURRENCES_A_YEAR = 2.5;
const FIRST_ATTACHMENT = 2;
const STEP = 1.55;

/**
 * Invented: one catalogue, a programme of layers that adjoin each other from working to remote, and a book on the same
 * events that loses about a fifth of capital 1 year in 250.
 */
export function benchInputs({ events, states, layers }: CaseSize): ValuationInputs {
  const catalogue = inventedCatalogue(events, OCCURRENCES_A_YEAR);
  const attachments = Array.from({ length: layers + 1 }, (_unused, l) => Number((FIRST_ATTACHMENT * STEP ** l).toPrecision(6)));
  return {
    grid: { seed: '5eed0123456789ab', states },
    catalogues: [catalogue],
    programme: {
      tables: [inventedTable(catalogue, 'programme', 80, 1, 7)],
      layers: Array.from({ length: layers }, (_unused, l) =>
        inventedLayer(`layer-${l + 1}`, (attachments[l + 1] ?? 0) - (attachments[l] ?? 0), attachments[l] ?? 0, { reinstatements: l < 3 ? [1, 1] : [1], annualDeductible: l === 0 ? 1 : 0 }),
      ),
      inceptionDay: 1,
      toHouseCurrency: 1,
    },
    book: [
      {
        tables: [inventedTable(catalogue, 'book', 600, 1, 8)],
        layers: [20, 45, 100, 220].map((a) => ({ ...inventedLayer(`xs${a}`, a * 1.25, a, { line: 0.5 }), premium: a * 0.09 })),
        toHouseCurrency: 1,
      },
    ],
    basis: { ...INVENTED_BASIS, capital: 900, attritionalAndOutward: 4 },
  };
}

/** Writes a case as the comparators read it: see comparator/README.md. */
export function writeCase(folder: string, inputs: ValuationInputs): void {
  mkdirSync(folder, { recursive: true });
  const [catalogue] = inputs.catalogues;
  const [contract] = inputs.book;
  const [programmeTable] = inputs.programme.tables;
  const [bookTable] = contract?.tables ?? [];
  if (catalogue === undefined || contract === undefined || programmeTable === undefined || bookTable === undefined) throw new Error('a case has one catalogue and one table each');
  const write = (name: string, column: Float64Array | Int32Array | Uint16Array): void => writeFileSync(join(folder, name), new Uint8Array(column.buffer, column.byteOffset, column.byteLength));
  write('catalogue.rate.f64', catalogue.ratePerYear);
  write('catalogue.season_day.f64', catalogue.seasonDay);
  write('catalogue.peril.u16', catalogue.perilIndex);
  write('catalogue.region.u16', catalogue.regionIndex);
  for (const [name, table] of [['programme', programmeTable], ['book', bookTable]] as const) {
    write(`${name}.event.i32`, table.eventIndex);
    write(`${name}.mean.f64`, table.meanLoss);
    write(`${name}.sd.f64`, table.sd);
    write(`${name}.common_share.f64`, table.commonShare);
    write(`${name}.exposed.f64`, table.exposedValue);
  }
  const { basis } = inputs;
  if (basis.discounting.mode !== 'anchored') throw new Error('a case is anchored');
  const terms = {
    states: inputs.grid.states,
    seed: inputs.grid.seed,
    inceptionDay: inputs.programme.inceptionDay,
    perils: catalogue.perils,
    regions: catalogue.regions,
    programme: { layers: inputs.programme.layers },
    book: { layers: contract.layers },
    basis: { ...basis, risklessRate: basis.discounting.risklessRate },
  };
  writeFileSync(join(folder, 'case.json'), JSON.stringify(terms));
}
