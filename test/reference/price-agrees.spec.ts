import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Catalogue, CatalogueVersion } from '../../api/contract/catalogues';
import type { Run, RunResult } from '../../api/contract/runs';
import { makeDemo } from '../../fixtures/demo/make';
import type { DemoContract, DemoScenario } from '../../fixtures/demo/scenario';
import { openHouse, type House } from '../support/house';
import { comparison, disagreements } from './agreement';
import { renewalInputs } from './demo-inputs';
import { catalogueCsv, lossTableCsv, priceByScipy, scipyRequestOf } from './scipy';

jest.setTimeout(300_000);

const SCALE = 0.1;
const STATES = 100_000;
const WIND = 'merrow-wind-and-storm-flood';

/** The demo with windier years, as the actuary's new version of the catalogue has them. */
function windier(demo: DemoScenario): DemoScenario {
  const blown = demo.catalogues.map((catalogue) =>
    catalogue.lineage !== WIND
      ? catalogue
      : {
          ...catalogue,
          events: catalogue.events.map((event) => ({ ...event, ratePerYear: event.ratePerYear * 1.2 })),
        },
  );
  return { ...demo, catalogues: blown };
}

/** A person signed in over the API, as any program would be. */
class Caller {
  private constructor(
    private readonly house: House,
    private readonly token: string,
  ) {}

  static async signIn(house: House, email: string): Promise<Caller> {
    const accounts = JSON.parse(readFileSync(join(house.dataDir, 'demo-accounts.json'), 'utf8')) as {
      email: string;
      password: string;
    }[];
    const account = accounts.find((one) => one.email === email);
    const { accessToken } = await new Caller(house, '').call<{ accessToken: string }>(
      'POST',
      '/tokens',
      account,
    );
    return new Caller(house, accessToken);
  }

  async call<T>(method: string, path: string, body?: object): Promise<T> {
    const json = { 'Content-Type': 'application/json' };
    const form = body instanceof FormData;
    const answer = await fetch(`${this.house.url}/api/v1${path}`, {
      method,
      headers: {
        ...(this.token === '' ? {} : { Authorization: `Bearer ${this.token}` }),
        ...(form ? {} : json),
      },
      ...(body === undefined ? {} : { body: form ? body : JSON.stringify(body) }),
    });
    const text = await answer.text();
    if (!answer.ok) throw new Error(`${method} ${path}: ${answer.status} ${text}`);
    return JSON.parse(text) as T;
  }

  upload<T>(path: string, fileName: string, text: string, fields: Record<string, string> = {}): Promise<T> {
    const form = new FormData();
    for (const [field, value] of Object.entries(fields)) form.append(field, value);
    form.append('file', new Blob([text]), fileName);
    return this.call<T>('POST', path, form);
  }
}

interface Named {
  readonly id: string;
  readonly name: string;
}

/** Uploads both files, lays the contract's terms on them and waits for the price. */
async function priced(
  house: House,
  contract: DemoContract,
  files: { catalogue: string; losses: string },
): Promise<Run> {
  const actuary = await Caller.signIn(house, 'abel.curran@house.example');
  const wind = (await actuary.call<Catalogue[]>('GET', '/catalogues')).find(
    ({ name }) => name === 'Merrow wind',
  );
  const version = await actuary.upload<CatalogueVersion>(
    `/catalogues/${wind?.id ?? ''}/versions`,
    'wind.csv',
    files.catalogue,
  );
  const releaser = await Caller.signIn(house, 'thea.lindqvist@house.example');
  await releaser.call('POST', `/catalogue-versions/${version.id}/release`, {});

  const underwriter = await Caller.signIn(house, 'una.writhe@house.example');
  const cedant = (await underwriter.call<Named[]>('GET', '/cedants')).find(
    ({ name }) => name === contract.cedant,
  );
  const firm = (await underwriter.call<(Named & { contacts: Named[] })[]>('GET', '/broker-firms')).find(
    ({ name }) => name === contract.brokerFirm,
  );
  const submission = await underwriter.call<{ id: string }>('POST', '/submissions', {
    cedantId: cedant?.id,
    brokerFirmId: firm?.id,
    contactId: firm?.contacts[0]?.id,
    treatyYear: 2027,
    inceptionOn: '2027-01-01',
    currency: contract.currency,
  });
  const table = await underwriter.upload<{ id: string }>(
    `/submissions/${submission.id}/loss-tables`,
    'losses.csv',
    files.losses,
    { name: 'Wind', catalogueId: wind?.id ?? '', currency: contract.currency, basisNote: 'gross' },
  );
  const programme = await underwriter.call<{ id: string }>(
    'POST',
    `/submissions/${submission.id}/programmes`,
    {
      name: contract.name,
      currency: contract.currency,
      inceptionOn: '2027-01-01',
      lossTableIds: [table.id],
      layers: contract.layers.map((layer) => ({
        key: layer.key,
        name: layer.name,
        limit: String(layer.limit),
        attachment: String(layer.attachment),
        annualDeductible: String(layer.annualDeductible),
        reinstatements: layer.reinstatements,
        brokerage: layer.brokerage,
        writtenLine: layer.line,
      })),
    },
  );
  const started = await underwriter.call<Run>('POST', `/programmes/${programme.id}/runs`, { states: STATES });
  for (;;) {
    const run = await underwriter.call<Run>('GET', `/runs/${started.id}`);
    if (run.state !== 'queued' && run.state !== 'running') return run;
    await new Promise((resolve) => setTimeout(resolve, 500));
  }
}

describe('a price taken through the API', () => {
  let house: House;
  beforeAll(async () => {
    house = await openHouse({ demo: true, env: { LEANYEAR_DEMO_SCALE: String(SCALE) } });
  });
  afterAll(() => house.stop());

  it('agrees with an independent valuation by SciPy on the same two files within 4 standard errors', async () => {
    const demo = windier(makeDemo(SCALE));
    const held = demo.book.find(({ lossTables }) => lossTables.length === 1);
    if (held === undefined) throw new Error('the demo has no contract on one loss table');
    // Not of the book itself, so that the whole book stays: the house holds such a line already.
    const contract: DemoContract = {
      ...held,
      layers: held.layers.map((layer) => ({ ...layer, annualDeductible: layer.limit / 10 })),
    };
    const inputs = renewalInputs(demo, contract, STATES);
    const { request, files } = scipyRequestOf(inputs);
    const [wind] = inputs.catalogues;
    const [losses] = inputs.programme.tables;
    if (wind?.lineage !== WIND || losses === undefined) throw new Error('the demo has no wind');
    const uploaded = { catalogue: catalogueCsv(wind), losses: lossTableCsv(losses, wind) };
    expect([...files.values()]).toEqual(expect.arrayContaining([uploaded.catalogue, uploaded.losses]));

    const run = await priced(house, contract, uploaded);
    expect(run.error).toBeNull();
    const ours = run.result as RunResult;
    const theirs = await priceByScipy(request, files, { states: 2 * STATES });
    expect(ours.states).toBe(STATES);
    expect(ours.selfCheck.flagged).toBe(false);
    expect(disagreements(comparison(ours, theirs))).toEqual([]);
    // Something has been compared: the book bears on the remote layers.
    const top = ours.layers.at(-1)?.split;
    expect((top?.leanLoad ?? 0) / (top?.risklessLoss ?? 1)).toBeGreaterThan(0.8);
  });
});
