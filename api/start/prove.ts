import { execFileSync } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { issueTokens } from '../contract/session';
import { readAccounts, type DemoAccount } from './accounts';
import type { BootstrapContext } from './context';
import { runInside, type InsideCommand, type InsideResult } from './prove-inside';
import { carriedEnvironment, cloneInto, makeTree, removeTree } from './prove-tree';

interface Person {
  readonly name: string;
  readonly home: string;
  readonly checkout: string;
  /** Where this person's start keeps its data, inside the tree. */
  readonly data: string;
}

const ROOT: Person = { name: 'root', home: '/root', checkout: '/srv/leanyear', data: '/var/lib/leanyear' };
const ORDINARY: Person = { name: 'una', home: '/home/una', checkout: '/home/una/leanyear', data: '/home/una/leanyear/.local' };

/** The accounts that a start wrote below its data folder. */
function accountsBelow(folder: string): readonly DemoAccount[] {
  const folders = [folder, ...readdirSync(folder).map((name) => join(folder, name))];
  const file = folders.map((each) => join(each, 'demo-accounts.json')).find((path) => existsSync(path));
  return file === undefined ? [] : readAccounts(readFileSync(file, 'utf8'));
}

/** Signs in by the API as the first of the demo's people. */
async function signIn(address: string, [account]: readonly DemoAccount[]): Promise<string> {
  if (account === undefined) return 'there is no demo account';
  const response = await fetch(`${address}/api/v1${issueTokens.path}`, {
    method: issueTokens.method.toUpperCase(),
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ email: account.email, password: account.password }),
  });
  return response.status === issueTokens.status ? 'signed in' : `sign-in answered ${response.status}`;
}

type Inside = Omit<InsideCommand, 'user' | 'cwd' | 'command' | 'onLine'>;
interface Verdict {
  readonly ok: boolean;
  readonly words: string;
}

/** npm start: waits for the address, signs in, and stops it as a Ctrl-C in a terminal would. */
async function proveStart(inside: Inside, person: Person): Promise<Verdict> {
  const since = Date.now();
  let doing: Promise<string> = Promise.resolve('no address was printed');
  const result = await runInside({
    ...inside,
    user: person,
    cwd: person.checkout,
    command: 'npm start',
    onLine: (line, interrupt) => {
      const address = /^Leanyear is at (\S+)/.exec(line)?.[1];
      if (address === undefined) return;
      const up = ((Date.now() - since) / 1000).toFixed(1);
      doing = signIn(address, accountsBelow(join(inside.tree, person.data)))
        .catch((error: unknown) => `sign-in failed: ${String(error)}`)
        .then((words) => `up after ${up} s, ${words}`)
        .finally(interrupt);
    },
  });
  const words = await doing;
  return { ok: words.endsWith(', signed in') && nothingLeft(result), words: `${words}, ${ending(result)}` };
}

/** npm start where something is missing that it may not install: it must name the command to run, and start nothing. */
async function proveRefusal(inside: Inside, person: Person): Promise<Verdict> {
  const result = await runInside({ ...inside, user: person, cwd: person.checkout, command: 'npm start' });
  const words = result.lines.find((line) => line.includes('apt-get install')) ?? 'no command was named';
  return { ok: result.code !== 0 && words.includes('postgresql') && nothingLeft(result), words: `${words.trim()}, ${ending(result)}` };
}

async function proveTest(inside: Inside, person: Person): Promise<Verdict> {
  const result = await runInside({ ...inside, user: person, cwd: person.checkout, command: '.ci/run' });
  const last = result.lines.filter((line) => line !== '' && !line.startsWith('left running')).at(-1) ?? '';
  return { ok: result.code === 0 && /^\d+ passed, 0 failed$/.test(last) && nothingLeft(result), words: `${last}, ${ending(result)}` };
}

const nothingLeft = ({ left }: InsideResult): boolean => left.length === 0;
const ending = ({ code, seconds, left }: InsideResult): string =>
  `ended with ${code} after ${seconds.toFixed(0)} s, ${left.length === 0 ? 'nothing left running' : `left running: ${left.join(', ')}`}`;

/**
 * Shows on a bare Debian, with Node and a clone of what is committed and nothing else, that both commands do their own
 * set-up: as root, who installs the servers, and after that as an ordinary user.
 */
export async function run(context: BootstrapContext): Promise<number> {
  const { root, dataDir, say, signal } = context;
  if (process.getuid?.() !== 0) throw new Error('npm run prove makes a bare Debian, and needs root for it.');
  const folder = join(dataDir, 'prove');
  const tree = join(folder, 'tree');
  mkdirSync(folder, { recursive: true });
  const logFile = join(folder, 'prove.log');
  rmSync(logFile, { force: true });
  const inside: Inside = { tree, env: carriedEnvironment(process.env), logFile, signal };
  const verdicts: Verdict[] = [];
  const step = async (name: string, work: () => Promise<Verdict>): Promise<void> => {
    say(`${name} …`);
    const verdict = await work();
    verdicts.push(verdict);
    say(`  ${verdict.ok ? 'ok' : 'FAILED'}: ${verdict.words}`);
  };
  try {
    makeTree(tree, say);
    execFileSync('chroot', [tree, 'useradd', '--create-home', '--shell', '/bin/sh', ORDINARY.name], { stdio: 'inherit' });
    for (const person of [ROOT, ORDINARY]) {
      cloneInto(tree, root, person.checkout);
      execFileSync('chroot', [tree, 'chown', '-R', `${person.name}:`, person.checkout], { stdio: 'inherit' });
    }
    await step('npm start as an ordinary user, nothing there', () => proveRefusal(inside, ORDINARY));
    await step('npm start as root, nothing there', () => proveStart(inside, ROOT));
    await step('npm start as root, again', () => proveStart(inside, ROOT));
    await step('npm test as root', () => proveTest(inside, ROOT));
    await step('npm start as an ordinary user, the servers there', () => proveStart(inside, ORDINARY));
    await step('npm test as an ordinary user', () => proveTest(inside, ORDINARY));
    rmSync(join(tree, 'usr/bin/redis-server'));
    await step('npm start as an ordinary user, without Redis', () => proveStart(inside, ORDINARY));
  } finally {
    removeTree(tree);
  }
  const failed = verdicts.filter(({ ok }) => !ok).length;
  say(`\n${verdicts.length - failed} of ${verdicts.length} as they should be; all output is in ${logFile}`);
  return failed === 0 ? 0 : 1;
}
