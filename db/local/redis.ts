import { spawn } from 'node:child_process';
import { chownSync, existsSync, mkdirSync, realpathSync, writeFileSync } from 'node:fs';
import { createConnection } from 'node:net';
import { delimiter, join } from 'node:path';
import { KeptProcess } from './kept-process';
import { endProcess, leftOverPid, type StopSignals } from './left-over';
import type { LogFile } from './log-file';
import { serverUser } from './system-user';

const STOP_SIGNALS: StopSignals = [
  ['SIGTERM', 10_000],
  ['SIGKILL', 5_000],
];

export interface RedisPlan {
  /** An absolute folder of its own, made when absent. */
  readonly folder: string;
  readonly port: number;
  readonly password: string;
  readonly log: LogFile;
  readonly say: (text: string) => void;
  /** How many numbered databases it holds. */
  readonly databases?: number;
}

export function redisUrl(plan: Pick<RedisPlan, 'port' | 'password'>, database = 0): string {
  return `redis://:${plan.password}@127.0.0.1:${plan.port}/${database}`;
}

export function findRedis(): string | null {
  const folders = [...(process.env['PATH'] ?? '').split(delimiter), '/usr/bin'];
  return folders.map((folder) => join(folder, 'redis-server')).find((path) => existsSync(path)) ?? null;
}

/** One PING under our password: another server on the port, or ours while it loads, does not answer with PONG. */
function ping(port: number, password: string): Promise<boolean> {
  return new Promise((resolve) => {
    let answer = '';
    const socket = createConnection({ port, host: '127.0.0.1', timeout: 1000 });
    const done = (ok: boolean): void => {
      socket.destroy();
      resolve(ok);
    };
    socket.on('error', () => done(false)).on('timeout', () => done(false)).on('close', () => done(false));
    socket.on('connect', () => socket.write(`AUTH ${password}\r\nPING\r\n`));
    socket.on('data', (chunk: Buffer) => {
      answer += chunk.toString('latin1');
      if (answer.split('\r\n').length > 2) done(answer === '+OK\r\n+PONG\r\n');
    });
  });
}

/** Ends a server that an earlier, killed command left in this folder. */
export async function endLeftOverRedis(folder: string): Promise<boolean> {
  const pid = leftOverPid(join(folder, 'redis.pid'), folder);
  if (pid !== null) await endProcess(pid, STOP_SIGNALS);
  return pid !== null;
}

/** Every acknowledged write is in the append-only file within a second; nothing is ever evicted, for jobs are no cache. */
function configuration(plan: RedisPlan, folder: string): string {
  return [
    'bind 127.0.0.1',
    `port ${plan.port}`,
    `requirepass ${plan.password}`,
    `dir "${folder}"`,
    `pidfile "${join(folder, 'redis.pid')}"`,
    'daemonize no',
    'appendonly yes',
    'save ""',
    'maxmemory-policy noeviction',
    `databases ${plan.databases ?? 16}`,
    '',
  ].join('\n');
}

export async function startRedis(plan: RedisPlan, program: string): Promise<KeptProcess> {
  const user = serverUser('redis');
  mkdirSync(plan.folder, { recursive: true, mode: 0o700 });
  const folder = realpathSync(plan.folder);
  if (await endLeftOverRedis(folder)) plan.say('A Redis left over from an earlier start was stopped.');
  // The password goes in by a file that only the server's user reads; on the command line everyone would see it.
  const file = join(folder, 'redis.conf');
  writeFileSync(file, configuration(plan, folder), { mode: 0o600 });
  if (user !== null) for (const path of [folder, file]) chownSync(path, user.uid, user.gid);
  const server = new KeptProcess({
    name: 'Redis',
    spawn: () => plan.log.lend((out) => spawn(program, [file], { ...user, cwd: '/', detached: true, stdio: ['ignore', out, out] })),
    serves: () => ping(plan.port, plan.password),
    patience: 60_000,
    stopSignals: STOP_SIGNALS,
    say: plan.say,
    lastWords: () => plan.log.lastWords(),
  });
  await server.start();
  return server;
}
