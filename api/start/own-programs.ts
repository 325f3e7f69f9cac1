import { fork, spawn, type ChildProcess } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { KeptProcess } from '../../db/local/kept-process';
import { endProcess, leftOverProgram } from '../../db/local/left-over';
import { LogFile } from '../../db/local/log-file';

/** Gives one of our programs the time to finish what it is doing. */
const STOP_SIGNALS = [
  ['SIGTERM', 15_000],
  ['SIGKILL', 5_000],
] as const;

export interface OwnProgram {
  readonly name: string;
  /** The compiled file. */
  readonly file: string;
  readonly env: NodeJS.ProcessEnv;
  readonly logDir: string;
  readonly say: (text: string) => void;
  readonly serves: () => Promise<boolean>;
}

const pidFileOf = (logDir: string, file: string): string => join(logDir, `${basename(dirname(file))}-${basename(file)}.pid`);

/** Ends what an earlier start, killed, has left: such a program ends by itself, but may still hold its port. */
export async function endLeftOver(logDir: string, file: string): Promise<void> {
  const pid = leftOverProgram(pidFileOf(logDir, file), file);
  if (pid !== null) await endProcess(pid, STOP_SIGNALS);
}

/**
 * A program of ours, kept running. It is forked with a channel: should we be killed, the channel closes and the
 * program ends itself, so that no API or worker outlives its supervisor.
 */
export function ownProgram({ name, file, env, logDir, say, serves }: OwnProgram): KeptProcess {
  const log = new LogFile(join(logDir, `${name.toLowerCase()}.log`));
  const spawnIt = (): ChildProcess => {
    const child = log.lend((out) => fork(file, { env, detached: true, stdio: ['ignore', out, out, 'ipc'] }));
    if (child.pid !== undefined) writeFileSync(pidFileOf(logDir, file), String(child.pid));
    return child;
  };
  return new KeptProcess({
    name: `The ${name}`,
    spawn: spawnIt,
    serves,
    patience: 60_000,
    stopSignals: STOP_SIGNALS,
    say,
    lastWords: () => log.lastWords(),
  });
}

/** Runs a compiled file of ours to its end; its output is said only when it fails. */
export function runOwn(name: string, file: string, env: NodeJS.ProcessEnv, signal: AbortSignal): Promise<string> {
  return new Promise((resolve, reject) => {
    let output = '';
    const child = spawn(process.execPath, [file], { env, signal, stdio: ['ignore', 'pipe', 'pipe'] });
    for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk: Buffer) => (output += chunk.toString()));
    child.once('error', reject);
    child.once('close', (code) => {
      if (code === 0) resolve(output);
      else reject(new Error(`The ${name} failed.\n${output}`));
    });
  });
}
