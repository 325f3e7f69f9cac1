import { spawn } from 'node:child_process';
import { mkdtempSync, realpathSync, rmSync, writeFileSync } from 'node:fs';
import { once } from 'node:events';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { KeptProcess, nextDelay, type KeptProcessPlan } from './kept-process';
import { isAlive, leftOverPid } from './left-over';
import { findPostgres } from './postgres-binaries';
import { freePort } from './ports';
import { serverUser } from './system-user';

let folder: string;
beforeEach(() => {
  folder = realpathSync(mkdtempSync(join(tmpdir(), 'local-')));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

describe('the delay before a process is started again', () => {
  it('doubles up to ten seconds, and is short again after a good minute', () => {
    const delays = [0, 0, 0, 0, 0, 0, 0, 0].reduce<number[]>((all) => [...all, nextDelay(all.at(-1) ?? 0, 10)], []);
    expect(delays).toEqual([200, 400, 800, 1600, 3200, 6400, 10_000, 10_000]);
    expect(nextDelay(10_000, 60_000)).toBe(200);
  });
});

describe('a kept process', () => {
  const said: string[] = [];
  const plan = (script: string): KeptProcessPlan => ({
    name: 'The test',
    spawn: () => spawn(process.execPath, ['-e', script], { stdio: 'ignore' }),
    serves: () => Promise.resolve(true),
    patience: 5000,
    stopSignals: [['SIGTERM', 3000], ['SIGKILL', 3000]],
    say: (text) => void said.push(text),
    lastWords: () => 'last words',
  });

  it('is started again when it is killed, and not when it is stopped', async () => {
    const kept = new KeptProcess(plan('setInterval(() => 0, 1000)'));
    await kept.start();
    const first = kept.pid ?? 0;
    process.kill(first, 'SIGKILL');
    while (kept.pid === first) await sleep(20);
    const second = kept.pid ?? 0;
    expect(isAlive(second)).toBe(true);
    await kept.stop();
    await sleep(300);
    expect(isAlive(second)).toBe(false);
    expect(kept.pid).toBe(second);
  });

  it('rejects with its last words when it ends before it serves', async () => {
    const kept = new KeptProcess({ ...plan('process.exit(3)'), serves: () => Promise.resolve(false) });
    await expect(kept.start()).rejects.toThrow(/ended \(3\).*\n?last words/);
  });

  it('is ended by force when it will not end by itself', async () => {
    const deaf = "process.on('SIGTERM', () => 0); setInterval(() => 0, 1000); process.send?.('up')";
    const kept = new KeptProcess({ ...plan(deaf), stopSignals: [['SIGTERM', 200], ['SIGKILL', 3000]] });
    await kept.start();
    await sleep(200);
    await kept.stop();
    expect(isAlive(kept.pid ?? 0)).toBe(false);
  });
});

describe('a server left over', () => {
  it('is known by its pid file and its folder, and no other process is taken for it', async () => {
    const child = spawn('sleep', ['30'], { cwd: folder });
    await once(child, 'spawn');
    const file = join(folder, 'pid');
    writeFileSync(file, `${child.pid ?? 0}\n${folder}\n`);
    expect(leftOverPid(file, folder)).toBe(child.pid);
    expect(leftOverPid(file, tmpdir())).toBeNull();
    expect(leftOverPid(join(folder, 'none'), folder)).toBeNull();
    child.kill('SIGKILL');
    await once(child, 'exit');
    expect(leftOverPid(file, folder)).toBeNull();
  });
});

describe('the programs of PostgreSQL', () => {
  const candidates = [{ folder: '/sixteen', major: 16 }, { folder: '/fifteen', major: 15 }];
  it('are the newest for a new folder, and those that made an old one', () => {
    expect(findPostgres(folder, candidates).major).toBe(16);
    writeFileSync(join(folder, 'PG_VERSION'), '15\n');
    expect(findPostgres(folder, candidates).major).toBe(15);
  });
  it('are asked for by name when they are missing', () => {
    expect(() => findPostgres(folder, [])).toThrow(/not on this machine/);
    writeFileSync(join(folder, 'PG_VERSION'), '13\n');
    expect(() => findPostgres(folder, candidates)).toThrow(/postgresql-13/);
  });
});

describe('the user of a server', () => {
  const passwd = (): string => 'root:x:0:0::/root:/bin/sh\npostgres:x:105:110::/var/lib/postgresql:/bin/sh\n';
  it('is its own for root, and whoever we are otherwise', () => {
    expect(serverUser('postgres', true, passwd)).toEqual({ uid: 105, gid: 110 });
    expect(serverUser('redis', true, passwd)).toBeNull();
    expect(serverUser('postgres', false, passwd)).toBeNull();
  });
});

describe('a free port', () => {
  it('is the first preferred one that is free', async () => {
    const free = await freePort();
    expect(await freePort(free)).toBe(free);
    expect(await freePort()).toBeGreaterThan(1023);
  });
});
