import { existsSync, readFileSync, readlinkSync } from 'node:fs';
import { setTimeout as sleep } from 'node:timers/promises';

/** Whether a process still runs; one that has ended and waits for a parent to take notice (state Z) does not. */
export function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    const stat = existsSync('/proc/self/stat') ? readFileSync(`/proc/${pid}/stat`, 'utf8') : '';
    return stat.charAt(stat.lastIndexOf(')') + 2) !== 'Z';
  } catch (error) {
    // Another user's process may not be signalled, but it is there.
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
}

/**
 * The server still running in this folder, by its pid file, after whoever started it was killed.
 * Both PostgreSQL and Redis work with their data folder as current directory: a process elsewhere that
 * happens to have got the old id is not ours, and is left alone.
 */
export function leftOverPid(pidFile: string, folder: string): number | null {
  try {
    const pid = Number.parseInt(readFileSync(pidFile, 'utf8'), 10);
    return pid > 1 && readlinkSync(`/proc/${pid}/cwd`) === folder ? pid : null;
  } catch {
    return null;
  }
}

/** A program of ours that still runs though whoever started it was killed: its id is on file and it runs this file. */
export function leftOverProgram(pidFile: string, program: string): number | null {
  try {
    const pid = Number.parseInt(readFileSync(pidFile, 'utf8'), 10);
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').includes(program) ? pid : null;
  } catch {
    return null;
  }
}

/** Signals in turn, each with the milliseconds it is given to work. */
export type StopSignals = readonly (readonly [NodeJS.Signals, number])[];

/** Asks a process to end, ever more firmly. */
export async function endProcess(pid: number, signals: StopSignals): Promise<void> {
  for (const [signal, patience] of signals) {
    if (!isAlive(pid)) return;
    try {
      process.kill(pid, signal);
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code === 'ESRCH') return;
      throw error;
    }
    for (const until = Date.now() + patience; Date.now() < until && isAlive(pid); ) await sleep(20);
  }
  if (isAlive(pid)) throw new Error(`Process ${pid} does not end.`);
}
