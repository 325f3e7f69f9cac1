import { mkdtempSync, mkdirSync, readdirSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:http';
import { connect, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Express } from 'express';
import { Writable } from 'node:stream';
import pino from 'pino';
import request from 'supertest';
import { z } from 'zod';
import { readConfig } from '../config/config';
import { route } from '../contract/route';
import type { Actor } from '../domain/shared/actor';
import { ChangedMeanwhile, Refused } from '../domain/shared/errors';
import { httpApp, newRouter } from './http-app';
import { refuseOtherMethods, serve, type ApiRouter } from './serve';
import { clearLeftUploads, diskUploads } from './uploads';

const ID = 'e4c6a0de-6e5c-4a9b-9d5c-0d8f3f6f3a11';
const actor: Actor = {
  personId: ID, name: 'Tess', email: 'tess@house.example', role: 'underwriter', firmId: null, sessionId: ID, permissions: ['submissions.read', 'submissions.write'],
};
const thing = z.object({ name: z.string(), version: z.number().int() });
const at = { tag: 'Test', summary: 'For the test' } as const;
const params = z.object({ id: z.uuid() });
const make = route({ ...at, method: 'post', path: '/things', access: 'submissions.write', body: z.object({ name: z.string().min(2), size: z.number() }), query: z.object({ page: z.coerce.number().int().optional() }), reply: thing, status: 201 });
const read = route({ ...at, method: 'get', path: '/things/:id', access: 'submissions.read', params, reply: thing, edits: 'etag' });
const change = route({ ...at, method: 'put', path: '/things/:id', access: 'submissions.write', params, body: z.object({ name: z.string() }), reply: thing, edits: 'if-match' });
const release = route({ ...at, method: 'post', path: '/things/:id/release', access: 'catalogues.release', params });
const open = route({ ...at, method: 'get', path: '/open', access: 'public', reply: z.object({ secret: z.string().optional() }) });
const upload = route({ ...at, method: 'post', path: '/files', access: 'submissions.write', form: 'file', body: z.object({ name: z.string().min(1) }), reply: z.object({ bytes: z.number(), originalName: z.string() }) });

describe('the HTTP layer', () => {
  const folder = mkdtempSync(join(tmpdir(), 'http-'));
  const screens = join(folder, 'screens');
  const uploads = join(folder, 'uploads');
  const lines: string[] = [];
  let app: Express;

  function build(env: NodeJS.ProcessEnv = {}, handle: (name: string) => void = () => undefined): Express {
    const config = readConfig({
      NODE_ENV: 'test', DATABASE_URL: 'postgres://a:b@127.0.0.1/c', LEANYEAR_DATA_DIR: folder, LEANYEAR_PUBLIC_URL: 'http://127.0.0.1:4200',
      JWT_SECRET: 'x'.repeat(32), LINK_SECRET: 'y'.repeat(32), ...env,
    });
    const log = pino({ level: 'error' }, new Writable({ write: (chunk: Buffer, _encoding, done) => { lines.push(chunk.toString()); done(); } }));
    const router: ApiRouter = {
      express: newRouter(),
      authenticate: async (req) => (req.get('authorization') === 'Bearer good' ? actor : null),
      uploads: diskUploads(uploads, 1000),
      bound: new Set(),
    };
    serve(router, make, ({ body }) => {
      handle(body.name);
      return { name: body.name, version: 1 };
    });
    serve(router, read, () => ({ name: 'a', version: 7 }));
    serve(router, change, ({ ifMatch }) => {
      if (ifMatch !== 7) throw new ChangedMeanwhile('thing');
      return { name: 'b', version: 8 };
    });
    serve(router, release, () => undefined);
    // A handler that answers more than its contract names.
    serve(router, open, () => ({ extra: 'not for you' }) as { secret?: string });
    serve(router, upload, ({ file }) => ({ bytes: file.bytes, originalName: file.originalName }));
    refuseOtherMethods(router);
    return httpApp({ config, log, api: router.express, outside: newRouter(), screens });
  }

  beforeAll(() => {
    mkdirSync(screens, { recursive: true });
    mkdirSync(uploads);
    writeFileSync(join(screens, 'index.html'), '<style nonce="__CSP_NONCE__"></style><app-root ngCspNonce="__CSP_NONCE__"></app-root>');
    writeFileSync(join(screens, 'main-ABCD1234.js'), 'let a = 1;');
    writeFileSync(join(screens, 'plain.txt'), 'plain');
    writeFileSync(join(folder, 'secret.txt'), 'secret');
    app = build();
  });
  afterAll(() => rmSync(folder, { recursive: true }));
  beforeEach(() => lines.splice(0));

  const as = (test: request.Test): request.Test => test.set('Authorization', 'Bearer good');
  const post = (body: object): request.Test => as(request(app).post('/api/v1/things')).send(body);

  describe('answers what went wrong as problem details', () => {
    const problem = async (test: request.Test, status: number): Promise<Record<string, unknown>> => {
      const res = await test;
      expect(res.status).toBe(status);
      expect(res.type).toBe('application/problem+json');
      expect(res.headers['cache-control']).toBe('no-store');
      expect(res.body).toMatchObject({ type: 'about:blank', status, title: expect.any(String) });
      return res.body as Record<string, unknown>;
    };

    it('400 for a body that is no JSON', () => problem(as(request(app).post('/api/v1/things')).type('json').send('{"name":'), 400));
    it('400 for an address that cannot be decoded', () => problem(as(request(app).get('/api/v1/things/%E0%A4%A')), 400));
    it('401 for nobody, before the body is looked at', () => problem(request(app).post('/api/v1/things').type('json').send('{"name":'), 401));
    it('403 for a lack of permission, which it names, before anything is parsed', async () => {
      expect((await problem(as(request(app).post('/api/v1/things/none/release')), 403))['detail']).toContain('catalogues.release');
    });
    it('404 for an unknown route, and for an id of another shape', async () => {
      await problem(request(app).get('/api/v1/nothing'), 404);
      await problem(request(app).get('/api'), 404);
      await problem(as(request(app).get('/api/v1/things/7')), 404);
    });
    it('405 with the methods that a path takes', async () => {
      const res = await as(request(app).delete(`/api/v1/things/${ID}`));
      expect({ status: res.status, allow: res.headers['allow'] }).toEqual({ status: 405, allow: 'GET, PUT' });
    });
    it('409 with every reason', async () => {
      app = build({}, () => {
        throw new Refused([{ code: 'a', message: 'One.' }, { code: 'b', message: 'Two.' }]);
      });
      expect(await problem(post({ name: 'abc', size: 1 }), 409)).toMatchObject({ reasons: [{ code: 'a' }, { code: 'b' }] });
      app = build();
    });
    it('412 where another was first, and 428 where no version is said', async () => {
      const put = (): request.Test => as(request(app).put(`/api/v1/things/${ID}`)).send({ name: 'b' });
      await problem(put().set('If-Match', '"6"'), 412);
      await problem(put(), 428);
      await problem(put().set('If-Match', '*'), 428);
    });
    it('413 for a body or file too large', async () => {
      await problem(post({ name: 'x'.repeat(2_000_000), size: 1 }), 413);
      await problem(as(request(app).post('/api/v1/files')).field('name', 'n').attach('file', Buffer.alloc(2000), 'a.csv'), 413);
      expect(readdirSync(uploads)).toEqual([]);
    });
    it('415 for another kind of content', async () => {
      await problem(as(request(app).post('/api/v1/things')).type('text/plain').send('name=a'), 415);
      await problem(as(request(app).post('/api/v1/things')).set('Content-Type', 'application/json; charset=iso-8859-1').send('{}'), 415);
      await problem(as(request(app).post('/api/v1/files')).send({ name: 'n' }), 415);
    });
    it('422 with all faults of query and body at once', async () => {
      const res = await as(request(app).post('/api/v1/things?page=x')).send({ name: 'a' });
      expect(res.status).toBe(422);
      expect((res.body as { errors: { path: string }[] }).errors.map((error) => error.path)).toEqual(['query.page', 'name', 'size']);
    });
    it('422 for text that no database takes', async () => {
      expect(await problem(post({ name: 'a\u0000b', size: 1 }), 422)).toMatchObject({ errors: [{ path: 'name' }] });
    });
    it('500 with an id that is in the log, and nothing of what was sent', async () => {
      app = build({}, (name) => {
        throw new Error(`broken${name.length}`);
      });
      const res = await post({ name: 'private name', size: 1 });
      const { errorId } = res.body as { errorId: string };
      expect({ status: res.status, id: res.headers['x-request-id'] }).toEqual({ status: 500, id: errorId });
      expect(JSON.stringify(res.body)).not.toContain('broken');
      expect(lines.join('')).toContain(errorId);
      expect(lines.join('')).not.toContain('private name');
      app = build();
    });
    it('429 with when to come again', async () => {
      const narrow = build({ LEANYEAR_RATE_LIMIT: '2' });
      await request(narrow).get('/api/v1/open').expect(200);
      await request(narrow).get('/api/v1/open').expect(200);
      const res = await request(narrow).get('/api/v1/open').expect(429);
      expect(Number(res.headers['retry-after'])).toBeGreaterThan(0);
      expect(res.type).toBe('application/problem+json');
    });
  });

  it.each([['/api/v1/session'], ['/api/v1/tokens'], ['/API/V1/Session/'], ['/api/v1/links/abc/order']])('bounds attempts at %s from one address', async (path) => {
    const narrow = build({ LEANYEAR_SIGN_IN_LIMIT: '1' });
    await request(narrow).post(path);
    await request(narrow).post(path).set('X-Forwarded-For', '203.0.113.9').expect(429);
  });

  it('believes a proxy only where the settings name it', async () => {
    const behind = build({ LEANYEAR_SIGN_IN_LIMIT: '1', LEANYEAR_TRUSTED_PROXIES: '1' });
    const from = (address: string): request.Test => request(behind).post('/api/v1/tokens').set('X-Forwarded-For', address);
    expect((await from('203.0.113.9')).status).not.toBe(429);
    expect((await from('203.0.113.10')).status).not.toBe(429);
    expect((await from('203.0.113.9')).status).toBe(429);
  });

  it('answers the version as entity tag, and takes it back', async () => {
    await as(request(app).get(`/api/v1/things/${ID}`)).expect(200).expect('ETag', '"7"');
    await as(request(app).put(`/api/v1/things/${ID}`)).set('If-Match', '"7"').send({ name: 'b' }).expect(200).expect('ETag', '"8"');
  });

  it('lets nothing out that the contract does not name', async () => {
    const res = await request(app).get('/api/v1/open').expect(200);
    expect(res.body).toEqual({});
  });

  it('receives a file under a name of its own, and keeps nothing of it', async () => {
    const send = (): request.Test => as(request(app).post('/api/v1/files')).field('name', 'n');
    const res = await send().attach('file', Buffer.from('a,b'), { filename: '../../Schäden 2026.csv' }).expect(200);
    expect(res.body).toEqual({ bytes: 3, originalName: 'Schäden 2026.csv' });
    await send().expect(422);
    await send().attach('file', Buffer.from('a'), 'a.csv').attach('file', Buffer.from('b'), 'b.csv').expect(422);
    await as(request(app).post('/api/v1/files')).field('name', '').attach('file', Buffer.from('a'), 'a.csv').expect(422);
    expect(readdirSync(uploads)).toEqual([]);
  });

  it('keeps nothing of an upload that breaks off, and goes on answering', async () => {
    const server = createServer(app);
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const { port } = server.address() as AddressInfo;
    const socket = connect(port, '127.0.0.1');
    const part = '--b\r\nContent-Disposition: form-data; name="file"; filename="a.csv"\r\n\r\nevent,rate';
    socket.write(`POST /api/v1/files HTTP/1.1\r\nHost: x\r\nAuthorization: Bearer good\r\nContent-Type: multipart/form-data; boundary=b\r\nContent-Length: 900\r\n\r\n${part}`);
    while (readdirSync(uploads).length === 0) await new Promise((resolve) => setTimeout(resolve, 5));
    socket.destroy();
    const until = Date.now() + 3000;
    while (readdirSync(uploads).length > 0 && Date.now() < until) await new Promise((resolve) => setTimeout(resolve, 5));
    expect(readdirSync(uploads)).toEqual([]);
    await request(server).get('/api/v1/open').expect(200);
    await new Promise((resolve) => server.close(resolve));
  });

  it('clears uploads that a killed process left, and no fresh one', async () => {
    for (const name of ['old', 'fresh']) writeFileSync(join(uploads, name), '');
    utimesSync(join(uploads, 'old'), new Date(0), new Date(0));
    await clearLeftUploads(uploads, 3600);
    expect(readdirSync(uploads)).toEqual(['fresh']);
    rmSync(join(uploads, 'fresh'));
  });

  describe('serves the screens', () => {
    it.each(['/', '/index.html', '/submissions/7', `/q/${ID}.${'aB3_'.repeat(10)}xyz`])('%s: the page, fresh, with the nonce of its own policy', async (path) => {
      const [first, second] = [await request(app).get(path).expect(200), await request(app).get(path).expect(200)];
      expect(first.headers['cache-control']).toBe('no-store');
      const nonce = /style-src 'self' 'nonce-([^']+)'/.exec(String(first.headers['content-security-policy']))?.[1] ?? 'none';
      expect(first.text).toBe(`<style nonce="${nonce}"></style><app-root ngCspNonce="${nonce}"></app-root>`);
      expect(second.text).not.toBe(first.text);
    });

    it('keeps hashed files for ever and others not', async () => {
      await request(app).get('/main-ABCD1234.js').expect(200).expect('Cache-Control', 'public, max-age=31536000, immutable');
      expect((await request(app).get('/plain.txt').expect(200)).headers['cache-control']).not.toContain('immutable');
      await request(app).get('/main-00000000.js').expect(404);
      await request(app).get('/..%2fsecret.txt').expect(404);
    });

    it('allows scripts of its own only, no frame, no sniffing, no referrer, and no https on plain http', async () => {
      const { headers } = await request(app).get('/');
      const policy = String(headers['content-security-policy']);
      for (const rule of ["default-src 'none'", "script-src 'self';", "connect-src 'self'", "worker-src 'self'", "img-src 'self' data: blob:", "frame-ancestors 'none'", "base-uri 'self'"]) {
        expect(policy).toContain(rule);
      }
      expect(policy).not.toMatch(/unsafe|upgrade-insecure|\*/);
      expect(headers).toMatchObject({ 'x-content-type-options': 'nosniff', 'referrer-policy': 'no-referrer', 'x-frame-options': 'SAMEORIGIN' });
      expect(headers['strict-transport-security']).toBeUndefined();
      expect(headers['x-powered-by']).toBeUndefined();
    });
  });
});
