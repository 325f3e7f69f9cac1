import { closeSync, existsSync, mkdirSync, openSync, readFileSync, renameSync, statSync } from 'node:fs';
import { dirname } from 'node:path';

const LARGEST = 5_000_000;

/** A log that a child writes to; the one before it is kept beside once it has grown. */
export class LogFile {
  constructor(readonly path: string) {
    mkdirSync(dirname(path), { recursive: true });
    if (existsSync(path) && statSync(path).size > LARGEST) renameSync(path, `${path}.1`);
  }

  /** Hands a descriptor to whoever spawns with it; ours is closed again. */
  lend<T>(use: (descriptor: number) => T): T {
    const descriptor = openSync(this.path, 'a', 0o600);
    try {
      return use(descriptor);
    } finally {
      closeSync(descriptor);
    }
  }

  lastWords(lines = 4): string {
    if (!existsSync(this.path)) return '';
    const last = readFileSync(this.path, 'utf8').split('\n').filter((line) => line !== '').slice(-lines);
    return [...last.map((line) => `    ${line}`), `    (${this.path})`].join('\n');
  }
}
