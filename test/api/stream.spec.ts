import { request as httpRequest, type IncomingMessage, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { PASSWORD, openTestApi, type TestApi, type TestPerson } from '../support/api';
import { LAYER, openTestDesk, type As, type TestDesk } from '../support/desk';

interface Heard {
  readonly res: IncomingMessage;
  text(): string;
  hangUp(): void;
}

describe('the stream of what has moved', () => {
  let api: TestApi;
  let desk: TestDesk;
  let una: As;
  let server: Server;
  let port: number;
  const open: Heard[] = [];
  beforeAll(async () => {
    api = await openTestApi();
    desk = await openTestDesk(api);
    una = desk.as('una.writhe@house.example');
    server = api.express.listen(0, '127.0.0.1');
    await new Promise((resolve) => server.once('listening', resolve));
    port = (server.address() as AddressInfo).port;
  }, 60_000);
  afterEach(() => {
    for (const one of open.splice(0)) one.hangUp();
  });
  afterAll(async () => {
    server.closeAllConnections();
    await new Promise((resolve) => server.close(resolve));
    await api.close();
  });

  const tokenOf = async (email: string): Promise<string> => {
    const res = await fetch(`http://127.0.0.1:${port}/api/v1/tokens`, {
      method: 'POST', headers: { 'Content-Type': 'application/json' }, body: JSON.stringify({ email, password: PASSWORD }),
    });
    return ((await res.json()) as { accessToken: string }).accessToken;
  };
  const listen = (token: string | null): Promise<Heard> =>
    new Promise((resolve, reject) => {
      const headers = { 'Accept-Encoding': 'gzip', ...(token === null ? {} : { Authorization: `Bearer ${token}` }) };
      const req = httpRequest({ host: '127.0.0.1', port, path: '/api/v1/events', headers }, (res) => {
        let text = '';
        res.setEncoding('utf8').on('data', (part: string) => (text += part));
        res.on('error', () => undefined);
        const heard = { res, text: () => text, hangUp: () => req.destroy() };
        open.push(heard);
        resolve(heard);
      });
      req.on('error', reject).end();
    });
  const until = async (what: () => boolean): Promise<void> => {
    for (const end = Date.now() + 5000; !what(); ) {
      if (Date.now() > end) throw new Error('nothing was heard');
      await new Promise((resolve) => setTimeout(resolve, 20));
    }
  };
  const startRun = async (): Promise<string> => {
    const body = { name: 'Heard', currency: 'EUR', inceptionOn: '2027-01-01', lossTableIds: desk.lossTableIds, layers: [LAYER] };
    const programme = (await una('post', `/submissions/${desk.submissionId}/programmes`).send(body).expect(201)).body as { id: string };
    return ((await una('post', `/programmes/${programme.id}/runs`).send({ states: 10_000 }).expect(201)).body as { id: string }).id;
  };

  it('tells people of the house at once, uncompressed, and brokers nothing of it', async () => {
    const [inside, outside] = [await listen(await tokenOf('una.writhe@house.example')), await listen(await tokenOf('bram@pell-marchbank.example'))];
    expect(inside.res.headers).toMatchObject({ 'content-type': expect.stringContaining('text/event-stream') as string, 'cache-control': 'no-cache, no-transform' });
    expect(inside.res.headers['content-encoding']).toBeUndefined();
    const id = await startRun();
    await until(() => inside.text().includes(id));
    expect(inside.text()).toMatch(/^retry: \d+\n\n/);
    expect(inside.text()).toContain(`data: {"topic":"run","id":"${id}","state":"queued"}\n\n`);
    expect(outside.text()).toBe('retry: 2000\n\n');
  });

  it('asks who listens', async () => {
    expect((await listen(null)).res.statusCode).toBe(401);
  });

  it('opens no more than a dozen for one person, and one again after another has closed', async () => {
    const person: TestPerson = await api.person('underwriter');
    const token = await tokenOf(person.email);
    for (let i = 0; i < 12; i += 1) expect((await listen(token)).res.statusCode).toBe(200);
    expect((await listen(token)).res.statusCode).toBe(429);
    open[0]?.hangUp();
    await new Promise((resolve) => setTimeout(resolve, 200));
    expect((await listen(token)).res.statusCode).toBe(200);
  });
});
