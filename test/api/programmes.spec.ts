import type request from 'supertest';
import type { Catalogue, CatalogueVersion } from '../../api/contract/catalogues';
import type { Programme } from '../../api/contract/programmes';
import type { LossTable, SubmissionSummary } from '../../api/contract/submissions';
import { openTestApi, type TestApi, type TestPerson } from '../support/api';

describe('programmes', () => {
  let api: TestApi;
  let underwriter: TestPerson;
  let submission: SubmissionSummary;
  let other: SubmissionSummary;
  const tables: LossTable[] = [];
  beforeAll(async () => {
    api = await openTestApi();
    underwriter = await api.person('underwriter');
    const actuary = await api.person('actuary');
    const catalogue = (await actuary.as('post', '/catalogues').send({ name: 'Isles' }).expect(201)).body as Catalogue;
    const events = Buffer.from('event,rate_per_year,peril,region\nA,0.1,wind,North\n');
    const version = (await actuary.as('post', `/catalogues/${catalogue.id}/versions`).attach('file', events, 'a.csv').expect(201)).body as CatalogueVersion;
    await actuary.as('post', `/catalogue-versions/${version.id}/release`).send({}).expect(200);
    [submission, other] = [await opened('One'), await opened('Other')];
    const upload = async (of: SubmissionSummary, mean: number): Promise<LossTable> => {
      const losses = Buffer.from(`event,mean_loss,sd,common_share\nA,${mean},0,0\n`);
      const test = underwriter.as('post', `/submissions/${of.id}/loss-tables`).field('name', 'Property').field('catalogueId', catalogue.id).field('currency', 'EUR');
      return (await test.attach('file', losses, 'l.csv').expect(201)).body as LossTable;
    };
    tables.push(await upload(submission, 1e6), await upload(submission, 2e6), await upload(other, 3e6));
  });
  afterAll(() => api.close());

  async function opened(cedant: string): Promise<SubmissionSummary> {
    const firm = await api.firm();
    const { id } = (await underwriter.as('post', '/cedants').send({ name: cedant, territory: 'Isles' }).expect(201)).body as { id: string };
    const body = { cedantId: id, brokerFirmId: firm.id, contactId: firm.contactId, treatyYear: 2027, inceptionOn: '2027-01-01', currency: 'EUR' };
    return (await underwriter.as('post', '/submissions').send(body).expect(201)).body as SubmissionSummary;
  }
  const layer = (over: object = {}): object => ({
    key: 'first', name: 'First layer', limit: '10000000', attachment: '5000000.50', reinstatements: [1, 0.5], brokerage: 0.1, writtenLine: 0.075, ...over,
  });
  const terms = (over: object = {}): object => ({
    name: 'Property cat', currency: 'EUR', inceptionOn: '2027-01-01', lossTableIds: [tables[1]?.id], layers: [layer(), layer({ key: 'second', attachment: '15000000' })], ...over,
  });
  const add = (body: object, id = submission.id): request.Test => underwriter.as('post', `/submissions/${id}/programmes`).send(body);
  const pathsOf = (res: request.Response): string[] => (res.body as { errors: { path: string }[] }).errors.map(({ path }) => path);

  it('adds a programme, keeps its terms to the digit, and counts it', async () => {
    const made = (await add(terms()).expect(201)).body as Programme;
    expect(made).toMatchObject({ submissionId: submission.id, version: 1, latestRunId: null });
    expect(made.terms.layers[0]).toEqual({ ...layer(), annualDeductible: '0' });
    const read = await underwriter.as('get', `/programmes/${made.id}`).expect(200).expect('ETag', '"1"');
    expect(read.body).toEqual(made);
    expect((await underwriter.as('get', `/submissions/${submission.id}/programmes`).expect(200)).body).toEqual([made]);
    expect((await underwriter.as('get', `/submissions/${submission.id}`).expect(200)).body).toMatchObject({ programmeCount: 1 });
  });

  it('tells the second of two who change it', async () => {
    const made = (await add(terms()).expect(201)).body as Programme;
    const put = (version: number, name: string): request.Test => underwriter.as('put', `/programmes/${made.id}`).set('If-Match', `"${version}"`).send(terms({ name }));
    expect((await put(1, 'Renamed').expect(200).expect('ETag', '"2"')).body).toMatchObject({ terms: { name: 'Renamed' }, version: 2 });
    await put(1, 'Late').expect(412);
    await underwriter.as('put', `/programmes/${made.id}`).send(terms()).expect(428);
    const both = await Promise.all([put(2, 'A'), put(2, 'B')]);
    expect(both.map((res) => res.status).sort()).toEqual([200, 412]);
  });

  it.each<[string, object, string]>([
    ['a limit of 0', { limit: '0' }, 'layers.0.limit'],
    ['an attachment below 0', { attachment: '-1' }, 'layers.0.attachment'],
    ['a line above 100%', { writtenLine: 1.01 }, 'layers.0.writtenLine'],
    ['a line of 0', { writtenLine: 0 }, 'layers.0.writtenLine'],
    ['six reinstatements', { reinstatements: [1, 1, 1, 1, 1, 1] }, 'layers.0.reinstatements'],
    ['a negative reinstatement price', { reinstatements: [-0.5] }, 'layers.0.reinstatements.0'],
    ['an amount that is a float', { limit: 10 }, 'layers.0.limit'],
    ['an amount of five places', { limit: '1.00001' }, 'layers.0.limit'],
  ])('refuses %s, at its field', async (_what, over, path) => expect(pathsOf(await add(terms({ layers: [layer(over)] })).expect(422))).toEqual([path]));

  it('refuses no layer, eleven layers, and two of one key', async () => {
    expect(pathsOf(await add(terms({ layers: [] })).expect(422))).toEqual(['layers']);
    const eleven = Array.from({ length: 11 }, (_, index) => layer({ key: `l${index}` }));
    expect(pathsOf(await add(terms({ layers: eleven })).expect(422))).toEqual(['layers']);
    expect(pathsOf(await add(terms({ layers: [layer(), layer()] })).expect(422))).toEqual(['layers']);
  });

  it('refuses the losses of another submission, and one table counted twice', async () => {
    expect(pathsOf(await add(terms({ lossTableIds: [tables[2]?.id] })).expect(422))).toEqual(['lossTableIds.0']);
    const twice = await add(terms({ lossTableIds: [tables[0]?.id, tables[1]?.id] })).expect(422);
    expect(twice.body).toMatchObject({ errors: [{ path: 'lossTableIds.1', message: 'is Property again: its losses would count twice' }] });
  });

  it('answers 404 for what there is not, and 409 on a closed submission', async () => {
    await underwriter.as('get', `/programmes/${submission.id}`).expect(404);
    await underwriter.as('put', `/programmes/${submission.id}`).set('If-Match', '"1"').send(terms()).expect(404);
    await add(terms(), tables[0]?.id).expect(404);
    await underwriter.as('patch', `/submissions/${other.id}`).set('If-Match', '"1"').send({ state: 'closed' }).expect(200);
    expect((await add(terms({ lossTableIds: [tables[2]?.id] }), other.id).expect(409)).body).toMatchObject({ reasons: [{ code: 'closed' }] });
  });
});
