import { execFileSync } from 'node:child_process';
import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';

const DEBIAN_BASE = '/usr/lib/postgresql';

export interface PostgresBinaries {
  readonly folder: string;
  readonly major: number;
}

/** Debian keeps the server's programs off the path, a folder a version; elsewhere they are on it. Newest first. */
function installed(): PostgresBinaries[] {
  const debian = (existsSync(DEBIAN_BASE) ? readdirSync(DEBIAN_BASE) : [])
    .map((version) => ({ folder: join(DEBIAN_BASE, version, 'bin'), major: Number.parseInt(version, 10) }))
    .filter(({ folder }) => existsSync(join(folder, 'initdb')))
    .sort((a, b) => b.major - a.major);
  if (debian.length > 0) return debian;
  try {
    const initdb = execFileSync('/bin/sh', ['-c', 'command -v initdb'], { encoding: 'utf8' }).trim();
    const version = execFileSync(initdb, ['--version'], { encoding: 'utf8' });
    return [{ folder: dirname(initdb), major: Number(/(\d+)/.exec(version)?.[1]) }];
  } catch {
    return [];
  }
}

/** The programs that can open this data folder: a folder made by one major version is read by that one alone. */
export function findPostgres(dataDir: string, candidates: readonly PostgresBinaries[] = installed()): PostgresBinaries {
  const versionFile = join(dataDir, 'PG_VERSION');
  const wanted = existsSync(versionFile) ? Number.parseInt(readFileSync(versionFile, 'utf8'), 10) : null;
  const found = candidates.find(({ major }) => wanted === null || major === wanted);
  if (found !== undefined) return found;
  if (candidates.length === 0) throw new Error('PostgreSQL’s server programs are not on this machine (Debian: postgresql).');
  const at = candidates.map(({ major }) => major).join(', ');
  const made = String(wanted);
  throw new Error(`The data in ${dataDir} was made by PostgreSQL ${made}, and only ${at} is installed (Debian: postgresql-${made}).`);
}
