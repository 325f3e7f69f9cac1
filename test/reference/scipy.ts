import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import * as z from 'zod';
import type {
  BookContract,
  Catalogue,
  HouseBasis,
  LayerTerms,
  LossTable,
  ValuationInputs,
} from '../../worker/engine';

const estimate = z.object({ value: z.number(), standardError: z.number() });
const scipyValuation = z.object({
  states: z.number(),
  layers: z.array(
    z.object({
      key: z.string(),
      expectedLoss: estimate,
      attachmentProbability: estimate,
      expectedReinstatement: estimate,
      pricedLoss: estimate,
      pricedReinstatement: estimate,
      marginalPremium: estimate,
      walkAwayPremium: estimate,
    }),
  ),
  programme: z.object({
    expectedGroundUp: estimate,
    walkAway: z.object({ parts: z.array(estimate), total: estimate }),
  }),
  house: z.object({
    sureValue: z.number(),
    risklessRate: z.number(),
    netPremium: z.number(),
    expectedBookLoss: estimate,
    largestSharpeRatio: estimate,
    floorShare: z.number(),
    effectiveStates: z.number(),
    oneIn100: estimate,
    oneIn250: estimate,
  }),
});
export type ScipyValuation = z.infer<typeof scipyValuation>;
export type Estimate = z.infer<typeof estimate>;

interface ScipyContract {
  readonly toHouseCurrency: number;
  readonly tables: readonly {
    readonly lineage: string;
    readonly catalogueLineage: string;
    readonly file: string;
    readonly toContractCurrency: number;
  }[];
  readonly layers: readonly (LayerTerms & { readonly premium?: number })[];
}

/** What scipy_price.py reads; its docstring gives the form. `files` holds the text of every CSV file that is named. */
export interface ScipyRequest {
  readonly catalogues: readonly { readonly lineage: string; readonly file: string }[];
  readonly programme: ScipyContract;
  readonly book: readonly ScipyContract[];
  readonly basis: HouseBasis;
}

/** Runs the independent valuation in a folder of its own. @throws Error with what Python said */
export async function priceByScipy(
  request: ScipyRequest,
  files: ReadonlyMap<string, string>,
  { states, seed = 1 }: { states: number; seed?: number },
): Promise<ScipyValuation> {
  const folder = mkdtempSync(join(tmpdir(), 'leanyear-scipy-'));
  try {
    for (const [name, text] of files) writeFileSync(join(folder, name), text);
    writeFileSync(join(folder, 'request.json'), JSON.stringify(request));
    const args = [
      join(__dirname, 'scipy_price.py'),
      join(folder, 'request.json'),
      '--states',
      String(states),
      '--seed',
      String(seed),
    ];
    const printed = await new Promise<string>((resolve, reject) => {
      execFile('python3', args, { maxBuffer: 10_000_000 }, (error, stdout, stderr) => {
        if (error === null) resolve(stdout);
        else reject(new Error(`scipy_price.py failed: ${stderr.trim() === '' ? error.message : stderr}`));
      });
    });
    return scipyValuation.parse(JSON.parse(printed));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

const blankNaN = (value: number | undefined): string =>
  value === undefined || Number.isNaN(value) ? '' : String(value);
const quoted = (text: string): string => `"${text.replaceAll('"', '""')}"`;

export function catalogueCsv(catalogue: Catalogue): string {
  const rows = catalogue.eventNames.map((name, i) => {
    const group = catalogue.groups[catalogue.groupIndex[i] ?? -1];
    return [
      quoted(name),
      catalogue.ratePerYear[i],
      quoted(catalogue.perils[catalogue.perilIndex[i] ?? 0] ?? ''),
      quoted(catalogue.regions[catalogue.regionIndex[i] ?? 0] ?? ''),
      blankNaN(catalogue.seasonDay[i]),
      group?.name ?? '',
      group?.varianceToMean ?? '',
    ].join(',');
  });
  return `${['event,rate_per_year,peril,region,season_day,group,variance_to_mean', ...rows].join('\n')}\n`;
}

export function lossTableCsv(table: LossTable, catalogue: Catalogue): string {
  const rows = Array.from(table.eventIndex, (event, i) =>
    [
      quoted(catalogue.eventNames[event] ?? ''),
      table.meanLoss[i],
      table.sd[i],
      table.commonShare[i],
      blankNaN(table.exposedValue[i]),
    ].join(','),
  );
  return `${['event,mean_loss,sd,common_share,exposed_value', ...rows].join('\n')}\n`;
}

/** The engine's inputs as files and a request, for the same valuation by SciPy. */
export function scipyRequestOf(inputs: ValuationInputs): {
  request: ScipyRequest;
  files: Map<string, string>;
} {
  const files = new Map<string, string>();
  const named = (name: string, text: () => string): string => {
    const file = `${name}.csv`;
    if (!files.has(file)) files.set(file, text());
    return file;
  };
  const contractOf = ({
    tables,
    layers,
    toHouseCurrency,
  }: Pick<BookContract, 'tables' | 'toHouseCurrency'> & {
    layers: readonly LayerTerms[];
  }): ScipyContract => ({
    toHouseCurrency,
    layers,
    tables: tables.map((table) => {
      const home = inputs.catalogues.find(({ lineage }) => lineage === table.catalogueLineage);
      if (home === undefined) throw new Error(`no catalogue ${table.catalogueLineage}`);
      const file = named(`table-${table.lineage}`, () => lossTableCsv(table, home));
      return {
        lineage: table.lineage,
        catalogueLineage: table.catalogueLineage,
        file,
        toContractCurrency: table.toContractCurrency,
      };
    }),
  });
  const catalogues = inputs.catalogues.map((catalogue) => ({
    lineage: catalogue.lineage,
    file: named(`catalogue-${catalogue.lineage}`, () => catalogueCsv(catalogue)),
  }));
  return {
    request: {
      catalogues,
      programme: contractOf(inputs.programme),
      book: inputs.book.map(contractOf),
      basis: inputs.basis,
    },
    files,
  };
}
