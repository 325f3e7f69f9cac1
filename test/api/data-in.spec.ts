import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import type request from 'supertest';
import type { Catalogue, CatalogueVersion } from '../../api/contract/catalogues';
import type { FileProblemReply } from '../../api/contract/files';
import type { LossTable, SubmissionSummary } from '../../api/contract/submissions';
import { openTestApi, type TestApi, type TestPerson } from '../support/api';

const HEAD = 'event,rate_per_year,peril,region,season_day,group,variance_to_mean';
const CATALOGUE = [HEAD, 'W1,0.02,wind,North,250,,', 'W2,0.005,wind,South,,gales,1.5', '"W3, the great",1e-3,wind,South,,gales,1.5', 'F1,0.05,flood,North,90,,', ''].join('\n');
const LOSSES = ['event,mean_loss,sd,common_share,exposed_value', 'W1,1000000,500000,0.3,9000000', 'W2,2500000.5,0,0,', '"W3, the great",4e6,6e6,1,', ''].join('\n');

describe('data in', () => {
  let api: TestApi;
  let actuary: TestPerson;
  let underwriter: TestPerson;
  let submission: SubmissionSummary;
  let catalogue: Catalogue;
  beforeAll(async () => {
    api = await openTestApi();
    [actuary, underwriter] = [await api.person('actuary', { name: 'Ada Actuary' }), await api.person('underwriter', { name: 'Una Writer' })];
    submission = await opened();
    catalogue = await catalogueNamed('Windward Isles');
  });
  afterAll(() => api.close());

  async function opened(): Promise<SubmissionSummary> {
    const firm = await api.firm();
    const cedant = await underwriter.as('post', '/cedants').send({ name: `Cedant ${firm.id}`, territory: 'Windward' }).expect(201);
    const body = { cedantId: (cedant.body as { id: string }).id, brokerFirmId: firm.id, contactId: firm.contactId, treatyYear: 2027, inceptionOn: '2027-01-01', currency: 'EUR' };
    return (await underwriter.as('post', '/submissions').send(body).expect(201)).body as SubmissionSummary;
  }
  const catalogueNamed = async (name: string): Promise<Catalogue> =>
    (await actuary.as('post', '/catalogues').send({ name, description: 'Invented' }).expect(201)).body as Catalogue;
  const upload = (id: string, text: string | Buffer, name = 'events.csv'): request.Test =>
    actuary.as('post', `/catalogues/${id}/versions`).attach('file', Buffer.from(text), name);
  const uploadLosses = (text: string | Buffer, over: Record<string, string> = {}, id = submission.id): request.Test => {
    const fields = { name: 'Property', catalogueId: catalogue.id, currency: 'EUR', basisNote: 'gross', ...over };
    const test = underwriter.as('post', `/submissions/${id}/loss-tables`);
    for (const [field, value] of Object.entries(fields)) void test.field(field, value);
    return test.attach('file', Buffer.from(text), 'losses.csv');
  };
  const problemsOf = (res: request.Response): [number, string | null, string][] =>
    (res.body as FileProblemReply).report.problems.map(({ line, column, message }) => [line, column, message]);
  const counts = async (): Promise<unknown> => {
    const tables = ['catalogue_versions', 'catalogue_events', 'catalogue_event_names', 'loss_tables', 'loss_table_versions', 'loss_rows'];
    const { rows } = await api.owner.query(`SELECT ${tables.map((table) => `(SELECT count(*)::int FROM ${table}) AS ${table}`).join(', ')}`);
    return { rows, uploads: readdirSync(join(api.dataDir, 'uploads')) };
  };

  it('says that nothing is released before an actuary has released it', async () => {
    await upload(catalogue.id, CATALOGUE).expect(201);
    const res = await uploadLosses(LOSSES).expect(409);
    expect(res.body).toMatchObject({ reasons: [{ code: 'no released catalogue', message: expect.stringContaining('An actuary uploads and releases one first') }] });
    await uploadLosses(LOSSES, { catalogueId: submission.id }).expect(422);
  });

  it('stores a catalogue as a draft with its figures, and shows its events', async () => {
    const read = (await actuary.as('get', `/catalogues/${catalogue.id}`).expect(200)).body as Catalogue;
    const [version] = read.versions;
    expect(version).toMatchObject({
      number: 1, state: 'draft', fileName: 'events.csv', eventCount: 4, uploadedBy: { name: 'Ada Actuary' }, releasedBy: null,
      perils: [{ peril: 'wind', events: 3 }, { peril: 'flood', events: 1, ratePerYear: 0.05 }],
      regions: [{ region: 'North', events: 2 }, { region: 'South', events: 2 }],
    });
    expect(version?.ratePerYear).toBeCloseTo(0.076, 12);
    expect(version?.contentHash).toMatch(/^[0-9a-f]{64}$/);
    const all = await actuary.as('get', `/catalogue-versions/${version?.id ?? ''}/events?limit=2&offset=1`).expect(200);
    expect(all.body).toEqual({
      total: 4,
      items: [
        { event: 'W2', ratePerYear: 0.005, peril: 'wind', region: 'South', seasonDay: null, group: 'gales', varianceToMean: 1.5 },
        { event: 'W3, the great', ratePerYear: 0.001, peril: 'wind', region: 'South', seasonDay: null, group: 'gales', varianceToMean: 1.5 },
      ],
    });
    const found = await actuary.as('get', `/catalogue-versions/${version?.id ?? ''}/events?search=GREAT`).expect(200);
    expect(found.body).toMatchObject({ total: 1 });
    expect((await actuary.as('get', `/catalogue-versions/${version?.id ?? ''}/events?search=%25`).expect(200)).body).toMatchObject({ total: 0 });
    await upload(catalogue.id, CATALOGUE).expect(409);
  });

  it('releases one version at a time, and keeps an event’s number through versions', async () => {
    const [first] = ((await actuary.as('get', `/catalogues/${catalogue.id}`)).body as Catalogue).versions;
    await actuary.as('post', `/catalogue-versions/${first?.id ?? ''}/release`).send({}).expect(200);
    await actuary.as('post', `/catalogue-versions/${first?.id ?? ''}/release`).send({}).expect(409);
    const longer = CATALOGUE.replace('F1,0.05,flood', 'E9,0.01,quake,East,,,\nF1,0.06,flood');
    const second = (await upload(catalogue.id, longer, 'two.csv').expect(201)).body as CatalogueVersion;
    expect(second).toMatchObject({ number: 2, state: 'draft', eventCount: 5 });
    const released = (await actuary.as('post', `/catalogue-versions/${second.id}/release`).send({ note: 'new flood rates' }).expect(200)).body as CatalogueVersion;
    expect(released).toMatchObject({ state: 'released', releasedBy: { name: 'Ada Actuary' }, releasedAt: expect.any(String) });
    const after = (await underwriter.as('get', `/catalogues/${catalogue.id}`).expect(200)).body as Catalogue;
    expect(after.versions.map(({ number, state }) => [number, state])).toEqual([[2, 'released'], [1, 'withdrawn']]);
    expect(after.released?.id).toBe(second.id);
    const { rows } = await api.owner.query('SELECT event, event_no FROM catalogue_event_names WHERE catalogue_id = $1 ORDER BY event_no', [catalogue.id]);
    expect(rows.map((row: { event: string }) => row.event)).toEqual(['W1', 'W2', 'W3, the great', 'F1', 'E9']);
    const trail = await api.owner.query(`SELECT action, from_state, to_state FROM audit_entries WHERE subject = 'catalogue version' ORDER BY id`);
    expect(trail.rows.slice(-2)).toEqual([
      { action: 'catalogue version withdrawn', from_state: 'released', to_state: 'withdrawn' },
      { action: 'catalogue version released', from_state: 'draft', to_state: 'released' },
    ]);
  });

  it('stores a loss table with its yearly mean and what it touches', async () => {
    const table = (await uploadLosses(LOSSES).expect(201)).body as LossTable;
    expect(table).toMatchObject({
      submissionId: submission.id, name: 'Property', number: 1, currency: 'EUR', basisNote: 'gross', rowCount: 3, superseded: false, uploadedBy: { name: 'Una Writer' },
      catalogue: { id: catalogue.id, name: 'Windward Isles', versionNumber: 2 },
    });
    expect(table.yearlyMean).toBeCloseTo(0.02 * 1e6 + 0.005 * 2500000.5 + 0.001 * 4e6, 6);
    const rows = await underwriter.as('get', `/loss-tables/${table.id}/rows`).expect(200);
    expect(rows.body).toEqual({
      total: 3,
      items: [
        { event: 'W1', meanLoss: 1e6, sd: 5e5, commonShare: 0.3, exposedValue: 9e6 },
        { event: 'W2', meanLoss: 2500000.5, sd: 0, commonShare: 0, exposedValue: null },
        { event: 'W3, the great', meanLoss: 4e6, sd: 6e6, commonShare: 1, exposedValue: null },
      ],
    });
    const stored = await api.owner.query('SELECT v.footprint, t.lineage FROM loss_table_versions v JOIN loss_tables t ON t.id = v.loss_table_id WHERE v.id = $1', [table.id]);
    expect(stored.rows[0]).toEqual({
      footprint: [{ peril: 'wind', region: 'North' }, { peril: 'wind', region: 'South' }],
      lineage: `${submission.reference.toLowerCase()}-property`,
    });
  });

  it('makes a new version of the same name, refuses the same file, and a table on another catalogue under that name', async () => {
    await uploadLosses(LOSSES).expect(409);
    const second = (await uploadLosses(LOSSES.replace('1000000', '1100000')).expect(201)).body as LossTable;
    expect(second.number).toBe(2);
    const list = (await underwriter.as('get', `/submissions/${submission.id}/loss-tables`).expect(200)).body as LossTable[];
    expect(list.map(({ number, superseded }) => [number, superseded])).toEqual([[2, false], [1, true]]);
    const other = await catalogueNamed('Leeward Isles');
    const version = (await upload(other.id, CATALOGUE).expect(201)).body as CatalogueVersion;
    await actuary.as('post', `/catalogue-versions/${version.id}/release`).send({}).expect(200);
    expect((await uploadLosses(LOSSES, { catalogueId: other.id }).expect(422)).body).toMatchObject({ errors: [{ path: 'name' }] });
  });

  describe('refuses a file with every problem at its place, and keeps nothing of it', () => {
    let before: unknown;
    beforeEach(async () => {
      before = await counts();
    });
    afterEach(async () => expect(await counts()).toEqual(before));

    it.each<[string, string | Buffer, RegExp]>([
      ['an empty file', '', /must not be empty/],
      ['a file of blank lines', '\n\n \n', /must not be empty/],
      ['a header alone', `${HEAD}\n`, /no events/],
      ['a zip renamed', Buffer.concat([Buffer.from('PK\x03\x04'), Buffer.alloc(400, 7)]), /zip archive/],
      ['text in UTF-16', Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from(CATALOGUE, 'utf16le')]), /UTF-16/],
      ['bytes that are no UTF-8', Buffer.concat([Buffer.from(`${HEAD}\nW1,0.1,wind,`), Buffer.from([0xe4, 0x0a])]), /UTF-8/],
      ['a binary', Buffer.from([1, 2, 3, 0, 5, 6]), /not text/],
      ['semicolons', CATALOGUE.replaceAll(',', ';'), /separated by commas/],
      ['an open quote', `${HEAD}\nW1,0.1,"wind,North,,,\nW2,0.1,wind,North,,,\n`, /quotation mark/],
    ])('%s', async (_what, text, message) => {
      const res = await upload(catalogue.id, text, 'x.csv').expect(422);
      expect(res.type).toBe('application/problem+json');
      expect(res.body).toMatchObject({ title: 'The file was refused', report: { fileName: 'x.csv' } });
      expect(problemsOf(res)[0]?.[2]).toMatch(message);
    });

    it('missing, doubled and unknown columns', async () => {
      const res = await upload(catalogue.id, 'event,Rate per year,event,peryl\nW1,1,W1,wind\n').expect(422);
      expect(problemsOf(res)).toEqual([
        [1, 'event', expect.stringContaining('twice')],
        [1, 'peryl', expect.stringContaining('is not a column')],
        [1, 'peril', expect.stringContaining('is missing')],
        [1, 'region', expect.stringContaining('is missing')],
      ]);
    });

    it('rows of a catalogue', async () => {
      const rows = [
        'A,0,wind,North,,,', 'B,-1,wind,North,,,', 'C,Infinity,wind,North,,,', 'D,"1,5",wind,North,,,', 'E,1e999,wind,North,,,', ',0.1,wind,North,,,', 'F,0.1,,North,,,',
        'G,0.1,Wind,North,,,', 'A,0.1,wind,North,,,', 'H,0.1,wind,North,366,,', 'I,0.1,wind,North,,,2', 'J,0.1,wind,North,,g,', 'K,0.1,wind,North,,g,1', 'L,0.1,wind,North,,g,2', 'M,0.1,wind,North,,g,3', 'N,0.1',
      ];
      const res = await upload(catalogue.id, [HEAD, ...rows].join('\r\n')).expect(422);
      expect(problemsOf(res).map(([line, column]) => [line, column])).toEqual([
        [2, 'rate_per_year'], [3, 'rate_per_year'], [4, 'rate_per_year'], [5, 'rate_per_year'], [6, 'rate_per_year'], [7, 'event'], [8, 'peril'], [9, 'peril'], [10, 'event'],
        [11, 'season_day'], [12, 'variance_to_mean'], [13, 'variance_to_mean'], [14, 'variance_to_mean'], [16, 'variance_to_mean'], [17, null],
      ]);
      expect(problemsOf(res)[8]?.[2]).toBe('stands on line 2 already; each event stands once');
      expect(res.body).toMatchObject({ report: { rows: 16, problemCount: 15, problems: expect.arrayContaining([expect.objectContaining({ line: 3, value: '-1' })]) } });
    });

    it('rows of a loss table', async () => {
      const rows = ['W1,-5,0,0,', 'W2,NaN,0,0,', 'nowhere,5,0,0,', '"W3, the great",100,50,1.5,', 'F1,100,90,0,150', 'F1,1,0,0,', 'E9,200,0,0,150'];
      const res = await uploadLosses([LOSSES.split('\n')[0], ...rows].join('\n'), { name: 'Bad' }).expect(422);
      expect(problemsOf(res)).toEqual([
        [2, 'mean_loss', 'must be a number, 0 or more and 1000000000000000 or less'],
        [3, 'mean_loss', expect.stringContaining('must be a number')],
        [4, 'event', 'is not an event of Windward Isles, version 2'],
        [5, 'common_share', expect.stringContaining('1 or less')],
        [6, 'sd', expect.stringContaining('must be below 70.7107')],
        [7, 'event', expect.stringContaining('stands on line 6 already')],
        [8, 'mean_loss', 'must not be above the exposed_value of 150'],
      ]);
    });

    it('counts all of very many problems, and shows a thousand', async () => {
      const res = await upload(catalogue.id, [HEAD, ...Array.from({ length: 1500 }, (_, index) => `E${index},x,wind,North,,,`)].join('\n')).expect(422);
      expect((res.body as FileProblemReply).report).toMatchObject({ rows: 1500, problemCount: 1500, problems: { length: 1000 } });
    });

    it('tens of megabytes of noise, at once', async () => {
      const began = Date.now();
      const noise = Buffer.alloc(40_000_000, 'event"noise,;x');
      const res = await upload(catalogue.id, noise).expect(422);
      expect(problemsOf(res)[0]?.[2]).toMatch(/no line break|quotation mark|commas/);
      expect(Date.now() - began).toBeLessThan(10_000);
    });

    it('a form without what it needs', async () => {
      const res = await uploadLosses(LOSSES, { currency: 'euro', name: '' }).expect(422);
      expect((res.body as { errors: { path: string }[] }).errors.map(({ path }) => path)).toEqual(['name', 'currency']);
      await underwriter.as('post', `/submissions/${submission.id}/loss-tables`).field('name', 'x').expect(422);
    });
  });

  it('takes a hundred thousand rows, through quotes, blank lines and any line ending', async () => {
    const wide = await catalogueNamed('Wide');
    const events = Array.from({ length: 100_000 }, (_, index) => `"E ""${index}""",${(index + 1) * 1e-9},wind,R${index % 7},,,`);
    const began = Date.now();
    const version = (await upload(wide.id, `\ufeff${HEAD.toUpperCase()}\r\n\r\n${events.join('\r\n')}\r\n`).expect(201)).body as CatalogueVersion;
    expect(version.eventCount).toBe(100_000);
    expect(Date.now() - began).toBeLessThan(15_000);
    const last = await actuary.as('get', `/catalogue-versions/${version.id}/events?offset=99999`).expect(200);
    expect(last.body).toMatchObject({ items: [{ event: 'E "99999"', ratePerYear: 1e-4 }] });
  }, 30_000);

  it('numbers versions one after the other when several come at once', async () => {
    const busy = await catalogueNamed('Busy');
    const answers = await Promise.all(Array.from({ length: 6 }, (_, index) => upload(busy.id, CATALOGUE.replace('0.02', `0.02${index}`))));
    expect(answers.map((res) => res.status)).toEqual(Array(6).fill(201));
    expect(answers.map((res) => (res.body as CatalogueVersion).number).sort()).toEqual([1, 2, 3, 4, 5, 6]);
    const releases = await Promise.all(answers.map((res) => actuary.as('post', `/catalogue-versions/${(res.body as CatalogueVersion).id}/release`).send({})));
    expect(releases.map((res) => res.status)).toEqual(Array(6).fill(200));
    const { rows } = await api.owner.query(`SELECT state FROM catalogue_versions WHERE catalogue_id = $1 AND state = 'released'`, [busy.id]);
    expect(rows).toHaveLength(1);
  });

  it('opens, changes and closes a submission, in which two people cannot overwrite each other', async () => {
    const made = await opened();
    expect(made).toMatchObject({ reference: expect.stringMatching(/^S2027-\d{4}$/), state: 'open', owner: { name: 'Una Writer' }, lossTableCount: 0, programmeCount: 0, version: 1, inceptionOn: '2027-01-01' });
    const patch = (version: number, body: object): request.Test => underwriter.as('patch', `/submissions/${made.id}`).set('If-Match', `"${version}"`).send(body);
    await underwriter.as('get', `/submissions/${made.id}`).expect(200).expect('ETag', '"1"');
    await patch(1, { note: 'Hurry' }).expect(200).expect('ETag', '"2"');
    await patch(1, { note: 'Slow' }).expect(412);
    const stranger = await api.firm();
    expect((await patch(2, { contactId: stranger.contactId }).expect(422)).body).toMatchObject({ errors: [{ path: 'contactId' }] });
    await patch(2, { state: 'closed' }).expect(200);
    expect((await uploadLosses(LOSSES, {}, made.id).expect(409)).body).toMatchObject({ reasons: [{ code: 'closed' }] });
    const list = (await underwriter.as('get', '/submissions').expect(200)).body as SubmissionSummary[];
    expect(list[0]).toMatchObject({ id: made.id, state: 'closed', note: 'Hurry', version: 3 });
  });

  it('opens no submission for a contact of another firm, nor for an unknown cedant', async () => {
    const [one, other] = [await api.firm(), await api.firm()];
    const body = { cedantId: submission.cedant.id, brokerFirmId: one.id, contactId: other.contactId, treatyYear: 2027, inceptionOn: '2027-01-01', currency: 'EUR' };
    expect((await underwriter.as('post', '/submissions').send(body).expect(422)).body).toMatchObject({ errors: [{ path: 'contactId' }] });
    expect((await underwriter.as('post', '/submissions').send({ ...body, contactId: one.contactId, cedantId: one.id }).expect(422)).body).toMatchObject({ errors: [{ path: 'cedantId' }] });
  });

  it('with four eyes on, wants another actuary to release', async () => {
    const strict = await openTestApi({ LEANYEAR_FOUR_EYES: '1' });
    const [one, two] = [await strict.person('actuary'), await strict.person('actuary')];
    const made = (await one.as('post', '/catalogues').send({ name: 'Watched' }).expect(201)).body as Catalogue;
    const version = (await one.as('post', `/catalogues/${made.id}/versions`).attach('file', Buffer.from(CATALOGUE), 'a.csv').expect(201)).body as CatalogueVersion;
    const refused = await one.as('post', `/catalogue-versions/${version.id}/release`).send({}).expect(409);
    expect(refused.body).toMatchObject({ reasons: [{ code: 'four eyes' }] });
    await two.as('post', `/catalogue-versions/${version.id}/release`).send({}).expect(200);
    await strict.close();
  });
});
