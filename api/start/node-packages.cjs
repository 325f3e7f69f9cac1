const { existsSync, readFileSync } = require('node:fs');
const { join } = require('node:path');
const { runToEnd } = require('./command.cjs');
const { Refusal } = require('./refusal.cjs');

/**
 * @param {string} version such as 20.19.1
 * @throws {Refusal} unless it is Node 20, from 20.19 on
 */
function checkNodeVersion(version) {
  const [major = 0, minor = 0] = version.split('.').map(Number);
  if (major !== 20 || minor < 19) {
    throw new Refusal(`Leanyear runs on Node 20, from 20.19 on; this is Node ${version}.`);
  }
}

/**
 * Whether what npm recorded as installed falls short of the lock file. Comparing the two records (rather than times)
 * leaves an install alone that a person made by hand.
 * @param {LockFile} wanted package-lock.json
 * @param {LockFile | null} installed node_modules/.package-lock.json, which npm writes when an install is complete
 * @typedef {{ packages: Record<string, { version?: string, integrity?: string, optional?: boolean, peer?: boolean }> }} LockFile
 */
function packagesAreStale(wanted, installed) {
  if (installed === null) return true;
  return Object.entries(wanted.packages).some(([path, entry]) => {
    if (path === '') return false;
    const found = installed.packages[path];
    // Optional packages are for some machines only, so one that is absent is no fault; a different one is.
    if (found === undefined) return entry.optional !== true;
    return found.version !== entry.version || found.integrity !== entry.integrity;
  });
}

/** @param {string} path @returns {LockFile | null} */
function readLock(path) {
  return existsSync(path) ? JSON.parse(readFileSync(path, 'utf8')) : null;
}

/**
 * Brings node_modules in line with the lock file.
 * @param {import('./context').BootstrapContext} context
 */
async function ensureNodePackages({ root, say, signal }) {
  const wanted = readLock(join(root, 'package-lock.json'));
  if (wanted === null) throw new Refusal('package-lock.json is missing: this is not a whole checkout.');
  if (!packagesAreStale(wanted, readLock(join(root, 'node_modules/.package-lock.json')))) return;
  say('Installing the npm packages (about a minute) …');
  // The compiler and the screens' framework are development packages: production mode would leave them out.
  const env = { ...process.env };
  delete env.NODE_ENV;
  delete env.npm_config_omit;
  const npm = process.env.npm_execpath;
  const args = ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'];
  const code =
    npm !== undefined && /\.[cm]?js$/.test(npm)
      ? await runToEnd(process.execPath, [npm, ...args], { cwd: root, env, signal })
      : await runToEnd('npm', args, { cwd: root, env, signal });
  if (code !== 0) throw new Refusal('npm could not install the packages; its own words are above.');
}

module.exports = { checkNodeVersion, packagesAreStale, ensureNodePackages };
