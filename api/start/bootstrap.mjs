// The door of `npm start`, `npm test` and `npm run prove`. It runs before node_modules exists, so it and
// the .cjs files beside it use Node's own modules only; the rest is compiled TypeScript, loaded when built.
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { BUILDS, buildServer, ensureBuild } from './builds.cjs';
import { prepareDataFolder } from './data-folder.cjs';
import { ensureDebianPackages, withoutGivenServers } from './debian-packages.cjs';
import { acquireLock, holderOf } from './lock.cjs';
import { checkNodeVersion, ensureNodePackages } from './node-packages.cjs';
import { Refusal } from './refusal.cjs';

/** What each command needs of Debian; what is missing is installed where that is allowed. */
const DEBIAN = {
  start: { required: ['postgresql'], wished: ['redis-server'] },
  test: { required: ['postgresql', 'redis-server', 'chromium', 'python3-scipy', 'curl'], wished: [] },
  prove: { required: ['debootstrap', 'git'], wished: [] },
  bench: { required: ['python3-scipy', 'gcc', 'libc6-dev'], wished: [] },
};

const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');
const [command = '', ...args] = process.argv.slice(2);
const say = (/** @type {string} */ text) => void process.stdout.write(`${text}\n`);

const stop = new AbortController();
for (const name of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(name, () => {
    // A terminal and npm may both pass on the same Ctrl-C: the first one stops, the others change nothing.
    if (!stop.signal.aborted) say('\nStopping …');
    stop.abort(new Refusal('Stopped before it was up.'));
  });
}

/** Says a refusal and goes on; any other error is passed up, and so is the wish to stop. */
function sayRefusal(/** @type {unknown} */ error) {
  if (!(error instanceof Refusal) || stop.signal.aborted) throw error;
  say(error.message);
}

/** Installs and builds under a lock, so that two commands at once in one checkout do not tread on each other. */
async function prepare(/** @type {import('./context.js').BootstrapContext} */ context) {
  const lock = await acquireLock(join(context.dataDir, 'prepare.lock'), {
    signal: stop.signal,
    onWait: () => say('Another command is preparing this checkout; waiting for it.'),
  });
  try {
    const wanted = DEBIAN[/** @type {keyof typeof DEBIAN} */ (command)];
    await ensureDebianPackages(context, command === 'start' ? withoutGivenServers(wanted, process.env) : wanted);
    await ensureNodePackages(context);
    // Tests go on where types are wrong (the compiler writes its files all the same, and the types are a part of the
    // tests), and build the screens in their turn: one fault must not hide all others.
    if (command === 'test') await buildServer(context).catch(sayRefusal);
    else await buildServer(context);
    if (command === 'start') await context.buildScreens();
  } finally {
    lock.release();
  }
}

async function main() {
  if (!(command in DEBIAN)) throw new Refusal('Say what to do: npm start, npm test, npm run bench or npm run prove.');
  checkNodeVersion(process.versions.node);
  const base = { root, dataDir: prepareDataFolder(root), args, say, signal: stop.signal };
  const context = { ...base, buildScreens: () => ensureBuild(base, BUILDS.ui), acquireLock, holderOf };
  const own = command === 'start' ? await acquireLock(join(context.dataDir, 'running.lock')) : null;
  try {
    await prepare(context);
    const { run } = createRequire(import.meta.url)(join(root, 'dist/server/api/start', `${command}.js`));
    return await run(context, own);
  } finally {
    own?.release();
  }
}

/** What we throw ourselves says in words what is wrong and what to do; anything else is a fault and is shown whole. */
function isWorded(/** @type {unknown} */ error) {
  return error instanceof Error && ['Error', 'Refusal'].includes(error.name) && !('code' in error);
}

function inWords(/** @type {any} */ error) {
  return isWorded(error) ? error.message : (error?.stack ?? String(error));
}

try {
  process.exitCode = await main();
} catch (error) {
  if (!stop.signal.aborted || isWorded(error)) process.stderr.write(`${inWords(error)}\n`);
  if (command === 'test') say('0 passed, 1 failed');
  process.exitCode = stop.signal.aborted ? 130 : 1;
}
// Handles that a library may have left open must not keep a command alive that has stopped what it started.
process.exit();
