import { spawnSync } from 'node:child_process';
import { cpus, totalmem } from 'node:os';

/** Runs a program to its end and answers what it printed; the environment holds numerical libraries to one thread. */
export function run(program: string, args: readonly string[]): string {
  const env = { ...process.env, OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1', MKL_NUM_THREADS: '1' };
  const done = spawnSync(program, args, { encoding: 'utf8', env, maxBuffer: 1 << 28, stdio: ['ignore', 'pipe', 'pipe'] });
  if (done.status !== 0) throw new Error(`${program} ${args.join(' ')} ended with ${done.status ?? done.signal ?? 'nothing'}:\n${done.stderr}`);
  return done.stdout;
}

export function median(numbers: readonly number[]): number {
  const sorted = [...numbers].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? (sorted[middle] ?? Number.NaN) : ((sorted[middle - 1] ?? 0) + (sorted[middle] ?? 0)) / 2;
}

export function machineInWords(): string {
  const [first] = cpus();
  return `${cpus().length} cores${first === undefined ? '' : ` (${first.model.trim()})`}, ${Math.round(totalmem() / 2 ** 30)} GiB, Node ${process.versions.node}`;
}

export const say = (text: string): void => void process.stdout.write(`${text}\n`);
