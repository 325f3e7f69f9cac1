import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { once } from 'node:events';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { answersOn, freePort } from '../../db/local/ports';
import { testVariable } from '../support/environment';

jest.setTimeout(90_000);

const ROOT = join(__dirname, '../..');

interface Started {
  readonly child: ChildProcess;
  readonly output: () => string;
  /** Waits for words on its output, or for its end. */
  readonly says: (words: RegExp) => Promise<string>;
  readonly ended: Promise<number | null>;
}

describe('npm start', () => {
  const dataDir = join(testVariable('TEST_DATA_DIR'), 'houses', 'start');
  let port: number;

  /** Whatever still runs out of this data folder: servers by their folder, our programs by their environment. */
  function running(): string[] {
    return readdirSync('/proc')
      .filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)
      .filter((pid) => {
        try {
          const about = ['cmdline', 'environ'].map((file) => readFileSync(join('/proc', pid, file), 'latin1')).join('\0');
          return about.includes(dataDir);
        } catch {
          return false;
        }
      });
  }

  function start(): Started {
    const env = { ...process.env, NODE_ENV: undefined, LEANYEAR_DATA_DIR: dataDir, LEANYEAR_DEMO: '0', PORT: String(port) };
    const child = spawn(process.execPath, [join(ROOT, 'api/start/bootstrap.mjs'), 'start'], { env, stdio: ['ignore', 'pipe', 'pipe'] });
    let output = '';
    for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk: Buffer) => (output += chunk.toString()));
    const ended = once(child, 'close').then(([code]) => code as number | null);
    const says = async (words: RegExp): Promise<string> => {
      while (!words.test(output)) {
        if (child.exitCode !== null || child.signalCode !== null) throw new Error(`It ended without saying ${String(words)}:\n${output}`);
        await sleep(30);
      }
      return output;
    };
    return { child, output: () => output, says, ended };
  }

  beforeEach(async () => {
    mkdirSync(dataDir, { recursive: true });
    port = await freePort();
  });
  afterEach(() => {
    for (const pid of running()) process.kill(Number(pid), 'SIGKILL');
    rmSync(dataDir, { recursive: true, force: true });
  });

  it('comes up, sends a second start to the first, is taken up after a kill -9, and leaves nothing behind when stopped twice', async () => {
    const first = start();
    await first.says(/Leanyear is at http:\/\/127\.0\.0\.1:\d+/);
    expect(await answersOn(port)).toBe(true);

    const second = start();
    expect(await second.ended).toBe(1);
    expect(second.output()).toContain(`runs at http://127.0.0.1:${port} already`);

    const database = readFileSync(join(dataDir, 'postgres/postmaster.pid'), 'utf8').split('\n')[0] ?? '';
    first.child.kill('SIGKILL');
    await first.ended;
    expect(running()).toContain(database);

    const third = start();
    const said = await third.says(/Leanyear is at/);
    expect(said).toMatch(/A PostgreSQL left over/);
    expect(said).toMatch(/A Redis left over/);
    expect(running()).not.toContain(database);

    third.child.kill('SIGINT');
    third.child.kill('SIGTERM');
    expect(await third.ended).toBe(0);
    expect(running()).toEqual([]);
    expect(existsSync(join(dataDir, 'running.lock'))).toBe(false);
  });

  it('starts killed servers again at their old ports', async () => {
    const started = start();
    await started.says(/Leanyear is at/);
    const pid = (file: string): number => Number.parseInt(readFileSync(join(dataDir, file), 'utf8'), 10);
    const before = [pid('postgres/postmaster.pid'), pid('redis/redis.pid'), pid('logs/api-main.js.pid')];
    for (const each of before) process.kill(each, 'SIGKILL');
    await started.says(/PostgreSQL is back/);
    await started.says(/Redis is back/);
    await started.says(/The API is back/);
    expect(await answersOn(port)).toBe(true);
    started.child.kill('SIGTERM');
    expect(await started.ended).toBe(0);
    expect(running()).toEqual([]);
  });

  it.each([100, 400, 800, 1200])('stops cleanly when it is told so %d ms after it began', async (moment) => {
    const started = start();
    await sleep(moment);
    started.child.kill('SIGINT');
    await started.ended;
    expect(running()).toEqual([]);
    // And what it left half done is no obstacle to the next.
    const next = start();
    await next.says(/Leanyear is at/);
    next.child.kill('SIGINT');
    expect(await next.ended).toBe(0);
  });

  it('refuses a port that is taken, in words', async () => {
    const started = start();
    await started.says(/Leanyear is at/);
    const other = join(dataDir, 'other');
    const child = spawn(process.execPath, [join(ROOT, 'api/start/bootstrap.mjs'), 'start'], {
      env: { ...process.env, LEANYEAR_DATA_DIR: other, LEANYEAR_DEMO: '0', PORT: String(port) },
    });
    let said = '';
    child.stderr.on('data', (chunk: Buffer) => (said += chunk.toString()));
    expect((await once(child, 'close'))[0]).toBe(1);
    expect(said).toBe(`Port ${port} (PORT) is taken on 127.0.0.1.\n`);
    started.child.kill('SIGINT');
    await started.ended;
    expect(running()).toEqual([]);
  });
});
