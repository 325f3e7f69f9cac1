import { execFile } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { Client } from 'pg';
import { openHouse, type House } from '../support/house';

const ROOT = join(__dirname, '../..');

/** The block of the README that is said to be run as printed. */
function printedJob(): string {
  const readme = readFileSync(join(ROOT, 'README.md'), 'utf8');
  const block = /<!-- main job: a test runs the next block as printed -->\n```sh\n([\s\S]*?)```/.exec(readme)?.[1];
  if (block === undefined) throw new Error('the README has lost its main job');
  return block;
}

describe('the main job, as the README prints it', () => {
  let house: House;
  beforeAll(async () => {
    house = await openHouse({ demo: true, env: { LEANYEAR_DEMO_SCALE: '0.05' } });
  }, 60_000);
  afterAll(() => house.stop());

  it('goes from two files to a bound contract, with every mail sent', async () => {
    const accounts = JSON.parse(readFileSync(join(house.dataDir, 'demo-accounts.json'), 'utf8')) as { email: string; password: string }[];
    const passwordOf = (email: string): string => accounts.find((account) => account.email === email)?.password ?? '';
    const env = {
      ...process.env,
      LEANYEAR: house.url,
      ACTUARY: passwordOf('abel.curran@house.example'),
      UNDERWRITER: passwordOf('una.writhe@house.example'),
      SENIOR: passwordOf('sena.orrick@house.example'),
      BROKER: passwordOf('quinn@quillon.example'),
    };
    const { stdout } = await promisify(execFile)('bash', ['--norc', '-eu', '-c', printedJob()], { cwd: ROOT, env, timeout: 90_000 });
    const lines = stdout.trim().split('\n');
    expect(lines[0]).toBe('released: 400 events, 1.10 a year');
    expect(lines[1]).toMatch(/^First: expected loss \d+\.\d\d% of limit, technical rate on line \d+\.\d\d%$/);
    expect(lines.slice(3)).toEqual(['referred', 'approved', 'issued', 'ordered', 'bound', 'book version 2, 31 contracts']);

    const owner = new Client({ connectionString: house.database.owner });
    await owner.connect();
    const mails = async () =>
      (await owner.query<{ kind: string; state: string; arrived: number }>(
        `SELECT kind, state, (SELECT count(*)::int FROM captured_mails k WHERE k.message_id = m.message_id) AS arrived FROM mails m ORDER BY kind`,
      )).rows;
    for (const end = Date.now() + 15_000; Date.now() < end && (await mails()).some(({ state }) => state !== 'sent'); ) {
      await new Promise((resolve) => setTimeout(resolve, 200));
    }
    const sent = await mails();
    await owner.end();
    expect([...new Set(sent.map(({ kind }) => kind))]).toEqual(['broker answered', 'quote bound', 'quote issued', 'referral outcome', 'referral waiting']);
    expect(sent.filter(({ state, arrived }) => state !== 'sent' || arrived !== 1)).toEqual([]);
  }, 120_000);
});
