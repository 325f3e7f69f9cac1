import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { BUILDS, fingerprint } from './builds.cjs';
import { dataFolderOf } from './data-folder.cjs';
import { installCommand, withoutGivenServers } from './debian-packages.cjs';
import { acquireLock, beganAt, holderOf } from './lock.cjs';
import { checkNodeVersion, packagesAreStale } from './node-packages.cjs';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'bootstrap-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

describe('the version of Node', () => {
  it.each(['20.19.0', '20.20.2'])('takes %s', (version) => expect(() => checkNodeVersion(version)).not.toThrow());
  it.each(['18.20.0', '20.18.3', '21.0.0', '22.1.0'])('refuses %s, naming it', (version) =>
    expect(() => checkNodeVersion(version)).toThrow(version),
  );
});

describe('whether the npm packages are stale', () => {
  const wanted = {
    packages: {
      '': { version: '1.0.0' },
      'node_modules/a': { version: '1.2.3', integrity: 'x' },
      'node_modules/for-another-machine': { version: '1.0.0', optional: true },
    },
  };
  const installed = (version: string): typeof wanted =>
    ({ packages: { 'node_modules/a': { version, integrity: 'x' } } }) as unknown as typeof wanted;

  it('is so when nothing is installed, or an install was cut short', () => expect(packagesAreStale(wanted, null)).toBe(true));
  it('is not so when all is there but what is for other machines', () => expect(packagesAreStale(wanted, installed('1.2.3'))).toBe(false));
  it('is so when one has another version', () => expect(packagesAreStale(wanted, installed('1.2.2'))).toBe(true));
  it('is so when one is missing', () => expect(packagesAreStale(wanted, { packages: {} })).toBe(true));
});

describe('the data folder', () => {
  it('lies inside the checkout for an ordinary user', () =>
    expect(dataFolderOf({ root: '/home/una/desk', isRoot: false })).toBe('/home/una/desk/.local'));
  it('is a system folder for root, another one for each checkout', () => {
    const one = dataFolderOf({ root: '/srv/one', isRoot: true });
    expect(one).toMatch(/^\/var\/lib\/leanyear\/[0-9a-f]{12}$/);
    expect(dataFolderOf({ root: '/srv/two', isRoot: true })).not.toBe(one);
  });
  it('is where the person says', () => expect(dataFolderOf({ root: '/srv/one', isRoot: true, override: '/data' })).toBe('/data'));
});

describe('the packages of Debian', () => {
  const wanted = { required: ['postgresql'], wished: ['redis-server'] };
  it('are not wanted for servers that the person names', () => {
    expect(withoutGivenServers(wanted, { DATABASE_URL: 'postgres://there' })).toEqual({ required: [], wished: ['redis-server'] });
    expect(withoutGivenServers(wanted, { REDIS_URL: 'redis://there' })).toEqual({ required: ['postgresql'], wished: [] });
  });
  it('are asked for by the very command to run', () =>
    expect(installCommand(['postgresql'])).toMatch(/^sudo apt-get update && sudo apt-get install .*postgresql$/));
});

describe('the lock', () => {
  it('names its holder, and is refused to a second', async () => {
    const lock = await acquireLock(join(folder, 'lock'));
    await expect(acquireLock(join(folder, 'lock'))).rejects.toThrow(/is still starting/);
    lock.publish('http://127.0.0.1:4200');
    await expect(acquireLock(join(folder, 'lock'))).rejects.toThrow(/runs at http:\/\/127\.0\.0\.1:4200/);
    expect(holderOf(join(folder, 'lock'))?.pid).toBe(process.pid);
    lock.release();
    expect(holderOf(join(folder, 'lock'))).toBeNull();
  });

  it('is taken over from a process that is gone, or whose number another process has now', async () => {
    for (const dead of [
      { pid: 2 ** 22 + 1, began: '5' },
      { pid: process.pid, began: '5' },
    ]) {
      writeFileSync(join(folder, 'lock'), JSON.stringify(dead));
      const lock = await acquireLock(join(folder, 'lock'));
      expect(JSON.parse(readFileSync(join(folder, 'lock'), 'utf8'))).toEqual({ pid: process.pid, began: beganAt(process.pid) });
      lock.release();
    }
  });

  it('is waited for where that is asked', async () => {
    const first = await acquireLock(join(folder, 'lock'));
    let waited = 0;
    const second = acquireLock(join(folder, 'lock'), { signal: new AbortController().signal, onWait: () => (waited += 1) });
    setTimeout(first.release, 100);
    (await second).release();
    expect(waited).toBe(1);
  });
});

describe('the fingerprint of a build', () => {
  const build = { ...BUILDS.server, inputs: ['api'] };
  it('changes with content and names, and not with specs or times', () => {
    mkdirSync(join(folder, 'api'));
    const write = (name: string, text: string): void => writeFileSync(join(folder, 'api', name), text);
    write('a.ts', 'one');
    const first = fingerprint(folder, build);
    write('a.spec.ts', 'a test');
    write('a.ts', 'one');
    expect(fingerprint(folder, build)).toBe(first);
    write('a.ts', 'two');
    const second = fingerprint(folder, build);
    expect(second).not.toBe(first);
    write('b.ts', '');
    expect(fingerprint(folder, build)).not.toBe(second);
  });
});
