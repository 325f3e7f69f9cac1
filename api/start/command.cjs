const { spawn } = require('node:child_process');
const { Refusal } = require('./refusal.cjs');

/**
 * Runs a program to its end, with its output passed through; aborting ends the program too.
 * @param {string} program
 * @param {readonly string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, signal: AbortSignal }} options
 * @returns {Promise<number>} its exit code
 */
function runToEnd(program, args, { cwd, env, signal }) {
  signal.throwIfAborted();
  return new Promise((resolve, reject) => {
    const child = spawn(program, args, { cwd, env, stdio: ['ignore', 'inherit', 'inherit'] });
    const end = () => void child.kill('SIGTERM');
    signal.addEventListener('abort', end, { once: true });
    child.once('error', (error) => {
      signal.removeEventListener('abort', end);
      reject(new Refusal(`Cannot run ${program}: ${error.message}`));
    });
    child.once('close', (code) => {
      signal.removeEventListener('abort', end);
      if (signal.aborted) reject(signal.reason);
      else resolve(code ?? 1);
    });
  });
}

module.exports = { runToEnd };
