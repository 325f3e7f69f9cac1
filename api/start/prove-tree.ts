import { execFileSync } from 'node:child_process';
import { copyFileSync, cpSync, existsSync, mkdirSync, symlinkSync, writeFileSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';

/** One suite of Debian that this machine installs from. */
export interface DebianSource {
  readonly uri: string;
  readonly suite: string;
  readonly component: string;
}

const SUITE = 'bookworm';
/** Variables that say how this machine reaches the net; a machine that needs none has none. */
const CARRIED = /^(https?_proxy|no_proxy|all_proxy|NODE_EXTRA_CA_CERTS|SSL_CERT_FILE|npm_config_registry)$/i;

/**
 * Reads the lines of `apt-get indextargets`, origin|suite|uri|component.
 * @throws Error when Debian bookworm is not among them: then there is nothing to build the tree from
 */
export function debianSources(lines: string): readonly DebianSource[] {
  const sources = [...new Set(lines.split('\n'))]
    .map((line) => line.split('|'))
    .flatMap(([origin, suite, uri, component]) =>
      origin === 'Debian' && suite !== undefined && uri !== undefined && component !== undefined && suite.startsWith(SUITE)
        ? [{ uri, suite, component }]
        : [],
    );
  if (!sources.some(({ suite, component }) => suite === SUITE && component === 'main')) {
    throw new Error(`This machine has no lists of Debian ${SUITE}; run apt-get update with its sources configured.`);
  }
  return sources;
}

function output(program: string, ...args: string[]): string {
  return execFileSync(program, args, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] }).trim();
}

/** Copies a file of this machine to the same place in the tree. */
function carry(tree: string, file: string | undefined): void {
  if (file === undefined || file === '' || !existsSync(file)) return;
  mkdirSync(dirname(join(tree, file)), { recursive: true });
  copyFileSync(file, join(tree, file));
}

export function carriedEnvironment(env: NodeJS.ProcessEnv): NodeJS.ProcessEnv {
  return Object.fromEntries(Object.entries(env).filter(([name]) => CARRIED.test(name)));
}

/** Puts this Node and its npm into the tree, and nothing else of this machine. */
function copyNode(tree: string): void {
  const npm = process.env['npm_execpath'];
  if (npm === undefined) throw new Error('Run it by: npm run prove');
  const library = join(tree, 'usr/local/lib/node_modules/npm');
  mkdirSync(join(tree, 'usr/local/bin'), { recursive: true });
  copyFileSync(process.execPath, join(tree, 'usr/local/bin/node'));
  cpSync(resolve(dirname(npm), '..'), library, { recursive: true });
  for (const name of ['npm', 'npx']) symlinkSync(`../lib/node_modules/npm/bin/${name}-cli.js`, join(tree, `usr/local/bin/${name}`));
}

/** How this machine reaches Debian and the npm registry, read now and written into the tree alone. */
function carrySettings(tree: string, sources: readonly DebianSource[]): void {
  for (const file of ['/etc/resolv.conf', '/etc/hosts', process.env['NODE_EXTRA_CA_CERTS'], process.env['SSL_CERT_FILE']]) carry(tree, file);
  const lists = sources.map(({ uri, suite, component }) => `deb ${uri} ${suite} ${component}`);
  writeFileSync(join(tree, 'etc/apt/sources.list'), `${lists.join('\n')}\n`);
  const acquire = output('apt-config', 'dump').split('\n').filter((line) => /^Acquire::https?::/i.test(line));
  writeFileSync(join(tree, 'etc/apt/apt.conf.d/90carried'), `${acquire.join('\n')}\n`);
  const npm = process.env['npm_execpath'] ?? '';
  const settings = ['registry', 'cafile', 'proxy', 'https-proxy'].flatMap((name) => {
    const value = output(process.execPath, npm, 'config', 'get', name, '--location=user');
    if (name === 'cafile') carry(tree, value);
    return value === '' || value === 'null' || value === 'undefined' ? [] : [`${name}=${value}`];
  });
  mkdirSync(join(tree, 'usr/local/etc'), { recursive: true });
  writeFileSync(join(tree, 'usr/local/etc/npmrc'), `${settings.join('\n')}\n`);
}

/** Takes the tree away, and never anything that is mounted in it. */
export function removeTree(tree: string): void {
  execFileSync('rm', ['-rf', '--one-file-system', tree], { stdio: 'inherit' });
}

/** Makes a bare Debian with Node in it. */
export function makeTree(tree: string, say: (text: string) => void): void {
  const format = '$(ORIGIN)|$(RELEASE)|$(REPO_URI)|$(COMPONENT)';
  const sources = debianSources(output('apt-get', 'indextargets', '--format', format, 'Created-By: Packages'));
  const mirror = sources.find(({ suite, component }) => suite === SUITE && component === 'main');
  say(`Making a bare Debian ${SUITE} …`);
  removeTree(tree);
  // In a mount namespace of its own: what debootstrap mounts goes with it, even if it is killed.
  execFileSync('unshare', ['--mount', 'debootstrap', '--variant=minbase', SUITE, tree, mirror?.uri ?? ''], { stdio: ['ignore', 'ignore', 'inherit'] });
  copyNode(tree);
  carrySettings(tree, sources);
}

/** Clones the checkout, as it is committed, into a folder of the tree. */
export function cloneInto(tree: string, root: string, folder: string): void {
  execFileSync('git', ['-c', 'safe.directory=*', 'clone', '--quiet', '--no-hardlinks', `file://${root}`, join(tree, folder)], { stdio: 'inherit' });
}
