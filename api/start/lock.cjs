const { linkSync, readFileSync, rmSync, writeFileSync } = require('node:fs');
const { setTimeout: sleep } = require('node:timers/promises');
const { Refusal } = require('./refusal.cjs');

/**
 * When a process began, in clock ticks since boot: with the id it names one process for good, for ids are reused.
 * @param {number} pid
 * @returns {string | null} null when there is no such process
 */
function beganAt(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // The name in parentheses may hold spaces; the fields after it do not. Field 22 of all, 20th after the name.
    return stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? null;
  } catch {
    return null;
  }
}

/**
 * @typedef {{ pid: number, began: string | null, address?: string }} Holder
 * @param {string} path
 * @returns {Holder | null} who holds the lock, or null when nobody alive does
 */
function holderOf(path) {
  try {
    const holder = /** @type {Holder} */ (JSON.parse(readFileSync(path, 'utf8')));
    return holder.began !== null && beganAt(holder.pid) === holder.began ? holder : null;
  } catch {
    return null;
  }
}

/**
 * Makes a file with its content in one step, so that nobody ever reads half of it.
 * @param {string} path
 * @param {string} text
 * @returns {boolean} false when there is one already
 */
function placeWhole(path, text) {
  const draft = `${path}.${process.pid}`;
  writeFileSync(draft, text, { mode: 0o600 });
  try {
    linkSync(draft, path);
    return true;
  } catch (error) {
    if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error;
    return false;
  } finally {
    rmSync(draft, { force: true });
  }
}

/**
 * Takes a lock file, over the body of a process that was killed if need be.
 * @param {string} path
 * @param {{ signal: AbortSignal, onWait: () => void }} [waiting] to wait for the holder; without it a held lock is refused
 * @throws {Refusal} naming the holder's address, when it is held and nobody waits
 */
async function acquireLock(path, waiting) {
  const mine = { pid: process.pid, began: beganAt(process.pid) };
  const text = JSON.stringify(mine);
  for (let said = false; ; ) {
    if (placeWhole(path, text)) {
      // Two that found the same dead holder may each have cleared the way; the one whose lines stayed has it.
      await sleep(30);
      if (holderOf(path)?.pid === process.pid) break;
    }
    const holder = holderOf(path);
    if (holder === null) {
      rmSync(path, { force: true });
      continue;
    }
    if (waiting === undefined) {
      const where = holder.address === undefined ? 'is still starting' : `runs at ${holder.address}`;
      throw new Refusal(`Leanyear ${where} already, started from this checkout (process ${holder.pid}).`);
    }
    if (!said) waiting.onWait();
    said = true;
    waiting.signal.throwIfAborted();
    await sleep(200);
  }
  return {
    publish: (/** @type {string} */ address) => writeFileSync(path, JSON.stringify({ ...mine, address }), { mode: 0o600 }),
    release: () => rmSync(path, { force: true }),
  };
}

module.exports = { beganAt, holderOf, acquireLock };
