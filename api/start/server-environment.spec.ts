import { generateSecrets } from './secrets';
import { serverEnvironment } from './server-environment';

const plan = {
  base: { PATH: '/bin' },
  servers: { database: { application: 'app', owner: 'owner', sealer: 'sealer' }, redis: 'redis', own: true },
  secrets: generateSecrets(),
  dataDir: '/data',
  port: 4321,
};

describe('the environment of our programs', () => {
  it('names servers, secrets, address and folder', () =>
    expect(serverEnvironment(plan)).toMatchObject({
      PATH: '/bin',
      NODE_ENV: 'production',
      PORT: '4321',
      DATABASE_URL: 'app',
      DATABASE_OWNER_URL: 'owner',
      SEALER_DATABASE_URL: 'sealer',
      REDIS_URL: 'redis',
      LEANYEAR_QUEUE: 'redis',
      LEANYEAR_DEMO: '1',
      LEANYEAR_DATA_DIR: '/data',
      LEANYEAR_PUBLIC_URL: 'http://127.0.0.1:4321',
      JWT_SECRET: plan.secrets.tokens,
    }));

  it('keeps the demo out of a database that is not our own, unless asked for', () => {
    const servers = { ...plan.servers, own: false };
    expect(serverEnvironment({ ...plan, servers })['LEANYEAR_DEMO']).toBe('0');
    expect(serverEnvironment({ ...plan, servers, base: { LEANYEAR_DEMO: '1' } })['LEANYEAR_DEMO']).toBe('1');
  });

  it('puts the queue in memory where there is no Redis', () => {
    const env = serverEnvironment({ ...plan, servers: { ...plan.servers, redis: null } });
    expect(env['LEANYEAR_QUEUE']).toBe('memory');
    expect(env).not.toHaveProperty('REDIS_URL');
  });

  it('makes other secrets each time they are generated, and no two alike', () => {
    const values = [...Object.values(generateSecrets()), ...Object.values(generateSecrets())];
    expect(new Set(values).size).toBe(values.length);
  });
});
