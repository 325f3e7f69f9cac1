import { Client } from 'pg';
import request from 'supertest';
import { openTestApi, type TestApi, type TestPerson } from '../support/api';

const bounds = {
  largestLineAmount: '5000000',
  largestLineShare: 0.1,
  lowestAdequacy: 0.95,
  startsOn: '2026-01-01',
  endsOn: '2099-12-31',
};

describe('people, firms and authority', () => {
  let api: TestApi;
  let administrator: TestPerson;
  let senior: TestPerson;
  let underwriter: TestPerson;
  beforeAll(async () => {
    api = await openTestApi();
    administrator = await api.person('administrator');
    senior = await api.person('senior underwriter');
    underwriter = await api.person('underwriter');
  });
  afterAll(() => api.close());

  it('opens an account whose first password signs in', async () => {
    const nia = { name: 'Nia New', email: 'Nia@House.example', role: 'underwriter' };
    const made = await administrator.as('post', '/people').send(nia).expect(201);
    const { person, firstPassword } = made.body as { person: { email: string }; firstPassword: string };
    expect(person.email).toBe('nia@house.example');
    await request(api.express).post('/api/v1/tokens').send({ email: 'nia@house.example', password: firstPassword }).expect(201);
    const again = await administrator.as('post', '/people').send(nia).expect(422);
    expect(again.body).toMatchObject({ errors: [{ path: 'email' }] });
  });

  it('refuses a broker without a firm and a firm for anyone else', async () => {
    const firm = await api.firm();
    await administrator.as('post', '/people').send({ name: 'B', email: 'b@b.example', role: 'broker' }).expect(422);
    await administrator.as('post', '/people').send({ name: 'B', email: 'b@b.example', role: 'actuary', firmId: firm.id }).expect(422);
  });

  it('tells the second of two people who change one account', async () => {
    const person = await api.person('actuary');
    const change = (name: string) => administrator.as('patch', `/people/${person.id}`).send({ name });
    await change('X').expect(428);
    await change('First').set('If-Match', '"1"').expect(200).expect('ETag', '"2"');
    const second = await change('Second').set('If-Match', '"1"').expect(412);
    expect(second.body).toMatchObject({ title: 'Changed meanwhile' });
  });

  it('lets the administrator record the first grant only, and nobody their own', async () => {
    await administrator.as('post', `/people/${underwriter.id}/first-grant`).send(bounds).expect(422);
    await administrator.as('post', `/people/${senior.id}/first-grant`).send(bounds).expect(201);
    const second = await administrator.as('post', `/people/${senior.id}/first-grant`).send(bounds).expect(409);
    expect(second.body).toMatchObject({ reasons: [{ code: 'not first' }] });
    await senior.as('post', `/people/${senior.id}/grants`).send(bounds).expect(403);
    const granted = await senior.as('post', `/people/${underwriter.id}/grants`).send(bounds).expect(201);
    const { id } = granted.body as { id: string };
    await senior.as('delete', `/grants/${id}`).expect(204);
    const list = await underwriter.as('get', `/people/${underwriter.id}/grants`).expect(200);
    expect(list.body).toEqual([
      expect.objectContaining({ id, largestLineAmount: '5000000.0000', endedAt: expect.any(String) as string }),
    ]);
  });

  it('grants no authority to an actuary, and none that ends before it starts', async () => {
    const actuary = await api.person('actuary');
    await senior.as('post', `/people/${actuary.id}/grants`).send(bounds).expect(422);
    const res = await senior.as('post', `/people/${underwriter.id}/grants`).send({ ...bounds, endsOn: '2025-01-01' }).expect(422);
    expect(res.body).toMatchObject({ errors: [{ path: 'endsOn' }] });
  });

  it('writes every act into a trail that the application cannot alter', async () => {
    const trail = await administrator.as('get', `/audit?subjectId=${senior.id}`).expect(200);
    expect((trail.body as { items: unknown[] }).items).toContainEqual(
      expect.objectContaining({ action: 'authority granted', actor: 'A administrator' }),
    );
    const application = new Client({ connectionString: api.database.url });
    await application.connect();
    const attempts = ['UPDATE audit_entries SET actor = actor', 'DELETE FROM audit_entries', 'TRUNCATE audit_entries', 'DROP TABLE audit_entries'];
    for (const sql of attempts) await expect(application.query(sql)).rejects.toThrow(/permission denied|must be owner/);
    await application.end();
  });

  it('reports every fault of a request at once', async () => {
    const res = await senior.as('post', `/people/${underwriter.id}/grants`).send({ largestLineAmount: '-1', largestLineShare: 2 }).expect(422);
    const paths = (res.body as { errors: { path: string }[] }).errors.map((error) => error.path);
    expect(paths).toEqual(expect.arrayContaining(['largestLineAmount', 'largestLineShare', 'lowestAdequacy', 'startsOn', 'endsOn']));
  });
});
