import { spawn } from 'node:child_process';
import { createWriteStream } from 'node:fs';

export interface InsideCommand {
  readonly tree: string;
  /** Inside the tree. */
  readonly cwd: string;
  readonly user: { readonly name: string; readonly home: string };
  readonly command: string;
  readonly env: NodeJS.ProcessEnv;
  /** Where all its output goes. */
  readonly logFile: string;
  readonly signal: AbortSignal;
  /** Given each line; what it returns is done meanwhile, and `interrupt` is a Ctrl-C. */
  readonly onLine?: (line: string, interrupt: () => void) => void;
}

export interface InsideResult {
  readonly code: number;
  readonly seconds: number;
  readonly lines: readonly string[];
  /** Names of processes that the command left running. */
  readonly left: readonly string[];
}

const LEFT = 'left running: ';

/**
 * The whole runs in mount and process namespaces of its own: whatever happens to us, the mounts go with the last
 * process in them, and the processes with the first. What still runs when the command has ended is named, then ended.
 */
const SCRIPT = `
mount -t proc proc "$TREE/proc" && mount --rbind /dev "$TREE/dev" || exit 99
chroot --userspec="$RUN_AS:$RUN_AS" "$TREE" /bin/sh -c 'cd "$RUN_IN" && eval "$RUN_COMMAND"'
code=$?
for folder in "$TREE"/proc/[0-9]*; do
  read -r name < "$folder/comm" 2>/dev/null || continue
  id=\${folder##*/}
  [ "$id" = 1 ] || echo "${LEFT}$name ($id)"
done
exit $code
`;

/** Runs a command in the tree as somebody. */
export function runInside({ tree, cwd, user, command, env, logFile, signal, onLine }: InsideCommand): Promise<InsideResult> {
  signal.throwIfAborted();
  const since = Date.now();
  const log = createWriteStream(logFile, { flags: 'a' });
  const child = spawn('unshare', ['--mount', '--pid', '--fork', '--kill-child', 'sh', '-c', SCRIPT], {
    detached: true,
    stdio: ['ignore', 'pipe', 'pipe'],
    env: {
      ...env,
      PATH: '/usr/local/sbin:/usr/local/bin:/usr/sbin:/usr/bin:/sbin:/bin',
      HOME: user.home,
      LANG: 'C.UTF-8',
      TREE: tree,
      RUN_AS: user.name,
      RUN_IN: cwd,
      RUN_COMMAND: command,
    },
  });
  const send = (name: NodeJS.Signals): void => {
    if (child.pid !== undefined) process.kill(-child.pid, name);
  };
  const abort = (): void => send('SIGKILL');
  signal.addEventListener('abort', abort, { once: true });
  const lines: string[] = [];
  let partial = '';
  const take = (chunk: Buffer): void => {
    log.write(chunk);
    const parts = (partial + chunk.toString()).split('\n');
    partial = parts.pop() ?? '';
    for (const line of parts) {
      lines.push(line);
      onLine?.(line, () => send('SIGINT'));
    }
  };
  child.stdout.on('data', take);
  child.stderr.on('data', take);
  return new Promise((resolve, reject) => {
    child.once('error', reject);
    child.once('close', (code) => {
      signal.removeEventListener('abort', abort);
      log.end();
      if (signal.aborted) return void reject(new Error('Stopped.'));
      const left = lines.filter((line) => line.startsWith(LEFT)).map((line) => line.slice(LEFT.length));
      resolve({ code: code ?? 1, seconds: (Date.now() - since) / 1000, lines, left });
    });
  });
}
