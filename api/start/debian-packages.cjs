const { spawnSync } = require('node:child_process');
const { existsSync, mkdirSync, readdirSync, rmSync, writeFileSync } = require('node:fs');
const { delimiter, dirname, join } = require('node:path');
const { runToEnd } = require('./command.cjs');
const { Refusal } = require('./refusal.cjs');

const APT = '/usr/bin/apt-get';
const CLUSTER_CONFIGURATION = '/etc/postgresql-common/createcluster.conf';
const SERVICE_POLICY = '/usr/sbin/policy-rc.d';

/** @param {string} program */
function onPath(program) {
  const folders = [...(process.env.PATH ?? '').split(delimiter), '/usr/bin', '/usr/sbin'];
  return folders.some((folder) => existsSync(join(folder, program)));
}

/** How to see that a package's part is here, however it came: the program counts, not the package. */
const PRESENT = /** @type {Record<string, () => boolean>} */ ({
  postgresql: () => {
    const base = '/usr/lib/postgresql';
    const found = existsSync(base) && readdirSync(base).some((v) => existsSync(join(base, v, 'bin/initdb')));
    return found || (onPath('postgres') && onPath('initdb'));
  },
  'redis-server': () => onPath('redis-server'),
  chromium: () => onPath('chromium'),
  'python3-scipy': () => spawnSync('python3', ['-c', 'import scipy'], { stdio: 'ignore' }).status === 0,
  debootstrap: () => onPath('debootstrap'),
  git: () => onPath('git'),
  curl: () => onPath('curl'),
  gcc: () => onPath('cc'),
  'libc6-dev': () => existsSync('/usr/include/stdio.h'),
});

/**
 * Servers named by the person are used as they are: their packages are not wanted then.
 * @param {{ required: string[], wished: string[] }} wanted
 * @param {NodeJS.ProcessEnv} env
 */
function withoutGivenServers(wanted, env) {
  const given = [env.DATABASE_URL ? 'postgresql' : '', env.REDIS_URL ? 'redis-server' : ''];
  const keep = (/** @type {string[]} */ names) => names.filter((name) => !given.includes(name));
  return { required: keep(wanted.required), wished: keep(wanted.wished) };
}

/** @param {readonly string[]} names */
function installCommand(names) {
  return `sudo apt-get update && sudo apt-get install -y --no-install-recommends ${names.join(' ')}`;
}

/** Debian would make a database cluster and start services of its own at installation; ours need neither. */
function holdBackServices() {
  const made = /** @type {string[]} */ ([]);
  const write = (/** @type {string} */ path, /** @type {string} */ text, /** @type {number} */ mode) => {
    if (existsSync(path)) return;
    mkdirSync(dirname(path), { recursive: true });
    writeFileSync(path, text, { mode });
    made.push(path);
  };
  write(CLUSTER_CONFIGURATION, 'create_main_cluster = false\n', 0o644);
  write(SERVICE_POLICY, '#!/bin/sh\nexit 101\n', 0o755);
  return () => made.filter((path) => path === SERVICE_POLICY).forEach((path) => rmSync(path, { force: true }));
}

/**
 * Installs what is missing where that is allowed (root, apt-get there, LEANYEAR_INSTALL not "no").
 * @param {import('./context').BootstrapContext} context
 * @param {{ required: string[], wished: string[] }} wanted what the command cannot do without, and what it would rather have
 * @throws {Refusal} naming the very command to run, when something required stays missing
 */
async function ensureDebianPackages({ say, signal }, wanted) {
  const missing = () => [...wanted.required, ...wanted.wished].filter((name) => !PRESENT[name]?.());
  const names = missing();
  if (names.length === 0) return;
  const allowed = process.getuid?.() === 0 && existsSync(APT) && process.env.LEANYEAR_INSTALL !== 'no';
  if (allowed) await install(names, say, signal);
  const left = missing();
  const lacking = left.filter((name) => wanted.required.includes(name));
  if (lacking.length > 0) {
    throw new Refusal(
      `Not on this machine: ${lacking.join(', ')}. Install with\n\n  ${installCommand(left)}\n\nand run the command again.`,
    );
  }
  if (left.length > 0) {
    say(`Not on this machine: ${left.join(', ')}. It can be had with: ${installCommand(left)}`);
  }
}

/**
 * @param {readonly string[]} names
 * @param {(text: string) => void} say
 * @param {AbortSignal} signal
 */
async function install(names, say, signal) {
  say(`Installing Debian's ${names.join(', ')} …`);
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C.UTF-8' };
  const release = holdBackServices();
  try {
    // An installation that was cut short before is finished first; apt would refuse to go on.
    await runToEnd('/usr/bin/dpkg', ['--configure', '-a'], { env, signal });
    if ((await runToEnd(APT, ['-qq', 'update'], { env, signal })) !== 0) say('apt-get update failed; trying with the lists at hand.');
    const options = ['-qq', '-o', 'Dpkg::Use-Pty=0', '-o', 'DPkg::Lock::Timeout=120', '-o', 'Dpkg::Options::=--force-confold', '--no-install-recommends'];
    const code = await runToEnd(APT, [...options, '-y', 'install', ...names], { env, signal });
    // One by one where they do not go together, so that an absent Redis does not cost the database as well.
    if (code !== 0) for (const name of names) await runToEnd(APT, [...options, '-y', 'install', name], { env, signal });
  } finally {
    release();
  }
}

module.exports = { withoutGivenServers, installCommand, ensureDebianPackages };
