const { createHash } = require('node:crypto');
const { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } = require('node:fs');
const { dirname, join, relative } = require('node:path');
const { runToEnd } = require('./command.cjs');
const { Refusal } = require('./refusal.cjs');

/**
 * @typedef {{ name: string, out: string, inputs: string[], skip: RegExp, program: string, args: string[] }} Build
 * @type {Record<'server' | 'ui', Build>}
 */
const BUILDS = {
  server: {
    name: 'server',
    out: 'dist/server',
    inputs: ['api', 'db', 'worker', 'fixtures', 'tsconfig.json', 'tsconfig.build.json', 'package-lock.json'],
    // Sample files of fixtures/ are read where they lie; only code is compiled.
    skip: /\.spec\.ts$|\.contract-suite\.ts$|^fixtures\/.*(?<!\.ts|\.json)$|\.[cm]js$/,
    program: 'node_modules/typescript/bin/tsc',
    args: ['-p', 'tsconfig.build.json'],
  },
  ui: {
    name: 'screens',
    out: 'dist/ui',
    inputs: ['ui', 'fonts', 'api/contract', 'api/domain', 'worker/engine', 'angular.json', 'tsconfig.json', 'package-lock.json'],
    skip: /\.spec\.ts$|\.harness\.ts$/,
    program: 'node_modules/@angular/cli/bin/ng.js',
    args: ['build'],
  },
};

/** @param {string} path @returns {string[]} every file below, in one order on every machine */
function filesBelow(path) {
  if (!existsSync(path)) return [];
  if (!statSync(path).isDirectory()) return [path];
  return readdirSync(path).filter((name) => name !== 'node_modules').sort().flatMap((name) => filesBelow(join(path, name)));
}

/**
 * A fingerprint of all that a build reads, by content: a fresh clone has new times on old files.
 * @param {string} root
 * @param {Build} build
 */
function fingerprint(root, build) {
  const hash = createHash('sha256');
  for (const file of build.inputs.flatMap((input) => filesBelow(join(root, input)))) {
    const name = relative(root, file);
    if (!build.skip.test(name)) hash.update(`${name}\0`).update(readFileSync(file)).update('\0');
  }
  return hash.digest('hex');
}

/** @param {string} root @param {Build} build */
const stampOf = (root, build) => join(root, `${build.out}.stamp`);

/** @param {string} root @param {Build} build */
function isFresh(root, build) {
  const stamp = stampOf(root, build);
  return existsSync(join(root, build.out)) && existsSync(stamp) && readFileSync(stamp, 'utf8') === fingerprint(root, build);
}

/**
 * Builds one side unless it is fresh.
 * @param {{ root: string, say: (text: string) => void, signal: AbortSignal }} context
 * @param {Build} build
 * @throws {Refusal} when it does not build
 */
async function ensureBuild({ root, say, signal }, build) {
  if (isFresh(root, build)) return;
  say(`Building the ${build.name} …`);
  const print = fingerprint(root, build);
  rmSync(stampOf(root, build), { force: true });
  const env = { ...process.env, NG_CLI_ANALYTICS: 'false' };
  const code = await runToEnd(process.execPath, [join(root, build.program), ...build.args], { cwd: root, env, signal });
  if (code !== 0) throw new Refusal(`The ${build.name} did not build; the reasons are above.`);
  mkdirSync(dirname(stampOf(root, build)), { recursive: true });
  writeFileSync(stampOf(root, build), print);
}

/** Takes away what was compiled from a file that is gone. @param {string} root */
function pruneServer(root) {
  const out = join(root, BUILDS.server.out);
  for (const file of filesBelow(out)) {
    const source = join(root, relative(out, file).replace(/\.js(\.map)?$/, '.ts'));
    if (/\.js(\.map)?$/.test(file) && !existsSync(source)) rmSync(file);
  }
}

/** @param {{ root: string, say: (text: string) => void, signal: AbortSignal }} context */
async function buildServer(context) {
  await ensureBuild(context, BUILDS.server);
  pruneServer(context.root);
}

module.exports = { BUILDS, filesBelow, fingerprint, isFresh, ensureBuild, pruneServer, buildServer };
