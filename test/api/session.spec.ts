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
  const refreshOf = (cookies: string): string => /leanyear-refresh=([^;]+)/.exec(cookies)?.[1] ?? 'none';
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
    expect(refreshOf(second)).not.toBe(refreshOf(first));
    expect(refreshOf(jar(await refresh(first).expect(200)))).toBe(refreshOf(second));
    await api.owner.query(`UPDATE sessions SET rotated_at = rotated_at - interval '1 minute'`);
    await refresh(first).expect(401);
    await refresh(second).expect(401);
    await request(api.express).get('/api/v1/session').set('Cookie', second).expect(401);
  });

  it('ends the session also when the old token is shown after several exchanges', async () => {
    const { email } = await api.person('underwriter');
    const stolen = jar(await signIn(email).expect(200));
    let thief = stolen;
    for (let exchange = 0; exchange < 3; exchange += 1) thief = jar(await refresh(thief).expect(200));
    await refresh(stolen).expect(401);
    await refresh(thief).expect(401);
    const trail = await api.owner.query(`SELECT 1 FROM audit_entries WHERE action LIKE 'session ended%' AND subject_id = (SELECT id::text FROM people WHERE email = $1)`, [email]);
    expect(trail.rowCount).toBe(1);
  });

  it('knows no refresh token that it did not make', async () => {
    const { email } = await api.person('underwriter');
    const good = refreshOf(jar(await signIn(email).expect(200)));
    const [session = '', value = '', digest = ''] = good.split('.');
    for (const forged of ['', 'x', `${session}.${value}`, `${session}.${'A'.repeat(43)}.${digest}`, `${good}.x`]) {
      await refresh(`__Host-leanyear-refresh=${forged}`).expect(401);
    }
    await refresh(`__Host-leanyear-refresh=${good}`).expect(200);
  });

  it('expires: the access token after ten minutes, the session when idle for twelve hours or after seven days', async () => {
    const { email } = await api.person('underwriter');
    const idle = jar(await signIn(email).expect(200));
    await api.owner.query(`UPDATE sessions SET rotated_at = now() - interval '12 hours 1 second' WHERE ended_at IS NULL`);
    await refresh(idle).expect(401);
    const old = jar(await signIn(email).expect(200));
    await api.owner.query(`UPDATE sessions SET expires_at = now() - interval '1 second'`);
    await refresh(old).expect(401);
    await request(api.express).get('/api/v1/session').set('Cookie', old).expect(401);
    const access = /leanyear-access=([^;]+)/.exec(jar(await signIn(email).expect(200)))?.[1] ?? '';
    const claims = JSON.parse(Buffer.from(access.split('.')[1] ?? '', 'base64url').toString()) as { iat: number; exp: number; email?: string };
    expect(claims.exp - claims.iat).toBe(600);
    expect(Object.keys(claims).sort()).toEqual(['aud', 'exp', 'iat', 'iss', 'sid', 'sub']);
  });

  it.each([
    ['no algorithm', (head: string, body: string) => `${Buffer.from('{"alg":"none","typ":"JWT"}').toString('base64url')}.${body}.${head ? 'e30' : ''}`],
    ['another signature', (head: string, body: string) => `${head}.${body}.${'A'.repeat(43)}`],
  ])('takes no access token with %s', async (_what, forge) => {
    const { email } = await api.person('underwriter');
    const res = await request(api.express).post('/api/v1/tokens').send({ email, password: PASSWORD }).expect(201);
    const [head = '', body = ''] = (res.body as { accessToken: string }).accessToken.split('.');
    await request(api.express).get('/api/v1/session').set('Authorization', `Bearer ${forge(head, body)}`).expect(401);
  });

  it('tries five passwords and no more, however many come at once', async () => {
    const { email } = await api.person('underwriter');
    const answers = await Promise.all(Array.from({ length: 20 }, () => signIn(email, 'wrong')));
    expect(answers.map((res) => res.status).sort()).toEqual([...Array<number>(4).fill(401), ...Array<number>(16).fill(429)]);
    const { rows } = await api.owner.query(
      `SELECT 1 FROM audit_entries WHERE action = 'sign-in refused' AND subject_id = (SELECT id::text FROM people WHERE email = $1)`,
      [email],
    );
    expect(rows).toHaveLength(5);
  });

  it('ends the session on sign-out by the refresh cookie alone, when the short one has gone', async () => {
    const { email } = await api.person('underwriter');
    const cookie = `__Host-leanyear-refresh=${refreshOf(jar(await signIn(email).expect(200)))}`;
    await request(api.express).delete('/api/v1/session').set('X-Leanyear-Request', '1').set('Cookie', cookie).expect(204);
    await refresh(cookie).expect(401);
  });

  it('signs in, refreshes and ends with bearer tokens', async () => {
    const { email } = await api.person('actuary');
    const issued = await request(api.express).post('/api/v1/tokens').send({ email, password: PASSWORD }).expect(201);
    const { refreshToken } = issued.body as { refreshToken: string };
    const renewed = await request(api.express).post('/api/v1/tokens/refresh').send({ refreshToken }).expect(200);
    const bearer = `Bearer ${(renewed.body as { accessToken: string }).accessToken}`;
    await request(api.express).get('/api/v1/session').set('Authorization', bearer).expect(200);
    await request(api.express).delete('/api/v1/tokens').set('Authorization', bearer).expect(204);
    await request(api.express).get('/api/v1/session').set('Authorization', bearer).expect(401);
  });

  it('shows the demo accounts in demo mode only', async () => {
    await request(api.express).get('/api/v1/demo/accounts').expect(404);
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
