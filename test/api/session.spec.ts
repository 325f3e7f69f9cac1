import request from 'supertest';
import { PASSWORD, openTestApi, type TestApi } from '../support/api';

describe('sessions', () => {
  let api: TestApi;
  beforeAll(async () => {
    api = await openTestApi();
  });
  afterAll(() => api.close());

  const cookiesOf = (res: request.Response): string[] => (res.headers['set-cookie'] as unknown as string[] | undefined) ?? [];
  const signIn = (email: string, password = PASSWORD) =>
    request(api.express).post('/api/v1/session').set('X-Leanyear-Request', '1').send({ email, password });
  /** The cookies are Secure, which a test over plain http sends by hand. */
  const jar = (res: request.Response): string => cookiesOf(res).map((cookie) => cookie.split(';')[0]).join('; ');
  const refresh = (cookie: string) =>
    request(api.express).post('/api/v1/session/refresh').set('X-Leanyear-Request', '1').set('Cookie', cookie);

  it('signs in with cookies that scripts cannot read and other sites cannot send', async () => {
    const { email } = await api.person('underwriter');
    const res = await signIn(email).expect(200);
    expect(res.body).toMatchObject({ person: { email, role: 'underwriter' } });
    const [access, refreshCookie] = cookiesOf(res);
    expect(access).toMatch(/^__Host-leanyear-access=.*; Path=\/; .*HttpOnly; Secure; SameSite=Lax$/);
    expect(refreshCookie).toMatch(/^__Host-leanyear-refresh=.*; Path=\/; .*HttpOnly; Secure; SameSite=Strict$/);
    const who = await request(api.express).get('/api/v1/session').set('Cookie', jar(res)).expect(200);
    expect(who.body).toEqual(res.body);
  });

  it('answers the same to a wrong password and to an unknown account', async () => {
    const { email } = await api.person('actuary');
    const wrong = await signIn(email, 'not the password').expect(401);
    const unknown = await signIn('nobody@house.example').expect(401);
    expect(wrong.body).toEqual(unknown.body);
    expect(wrong.type).toBe('application/problem+json');
  });

  it('locks an account after five failures, also against the right password, and says for how long', async () => {
    const { email } = await api.person('underwriter');
    for (let attempt = 1; attempt <= 4; attempt += 1) await signIn(email, 'wrong').expect(401);
    const fifth = await signIn(email, 'wrong').expect(429);
    expect(Number(fifth.headers['retry-after'])).toBeGreaterThan(0);
    const right = await signIn(email).expect(429);
    expect(right.body).toMatchObject({ detail: expect.stringContaining('Try again in 1 minute') as string });
    await api.owner.query(`UPDATE sign_in_attempts SET locked_until = now() - interval '1 second'`);
    await signIn(email).expect(200);
  });

  it('refuses to act by cookie without our header, or from another origin', async () => {
    const { email } = await api.person('underwriter');
    const cookie = jar(await signIn(email).expect(200));
    const act = () => request(api.express).post('/api/v1/cedants').set('Cookie', cookie).send({ name: 'C', territory: 'T' });
    await act().expect(403);
    await act().set('X-Leanyear-Request', '1').set('Origin', 'https://elsewhere.example').expect(403);
    await act().set('X-Leanyear-Request', '1').set('Origin', 'http://127.0.0.1:4200').expect(201);
  });

  it('rotates the refresh token, tolerates two tabs, and ends the session when an old one is shown later', async () => {
    const { email } = await api.person('underwriter');
    const first = jar(await signIn(email).expect(200));
    const second = jar(await refresh(first).expect(200));
    expect(second).not.toBe(first);
    await refresh(first).expect(200);
    await api.owner.query(`UPDATE sessions SET rotated_at = rotated_at - interval '1 minute'`);
    await refresh(first).expect(401);
    await refresh(second).expect(401);
    await request(api.express).get('/api/v1/session').set('Cookie', second).expect(401);
  });

  it('ends the session on sign-out', async () => {
    const { email } = await api.person('broker');
    const cookie = jar(await signIn(email).expect(200));
    await request(api.express).delete('/api/v1/session').set('X-Leanyear-Request', '1').set('Cookie', cookie).expect(204);
    await request(api.express).get('/api/v1/session').set('Cookie', cookie).expect(401);
    await refresh(cookie).expect(401);
  });

  it('stops answering at once when the account is switched off', async () => {
    const [administrator, underwriter] = [await api.person('administrator'), await api.person('underwriter')];
    await underwriter.as('get', '/session').expect(200);
    await administrator.as('patch', `/people/${underwriter.id}`).set('If-Match', '"1"').send({ active: false }).expect(200);
    await underwriter.as('get', '/session').expect(401);
  });

  it('changes a password, refuses weak ones, and ends the other sessions', async () => {
    const person = await api.person('underwriter');
    const other = jar(await signIn(person.email).expect(200));
    await person.as('put', '/session/password').send({ current: 'wrong', next: 'another long phrase' }).expect(422);
    await person.as('put', '/session/password').send({ current: PASSWORD, next: 'short' }).expect(422);
    await person.as('put', '/session/password').send({ current: PASSWORD, next: 'passwordpassword' }).expect(422);
    await person.as('put', '/session/password').send({ current: PASSWORD, next: 'another long phrase' }).expect(204);
    await request(api.express).get('/api/v1/session').set('Cookie', other).expect(401);
    await signIn(person.email, 'another long phrase').expect(200);
  });

  it('stores argon2id hashes of passwords', async () => {
    const { email } = await api.person('underwriter');
    const { rows } = await api.owner.query<{ password_hash: string }>('SELECT password_hash FROM people WHERE email = $1', [email]);
    expect(rows[0]?.password_hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
  });
});
