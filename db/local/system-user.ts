import { readFileSync } from 'node:fs';

export interface SystemUser {
  readonly uid: number;
  readonly gid: number;
}

/**
 * The user that a server is to run as: the named one when we are root and it exists, else ourselves.
 * @param passwd the user database, in the format of passwd(5)
 */
export function serverUser(
  name: string,
  isRoot: boolean = process.getuid?.() === 0,
  passwd: () => string = () => readFileSync('/etc/passwd', 'utf8'),
): SystemUser | null {
  if (!isRoot) return null;
  const fields = passwd()
    .split('\n')
    .map((line) => line.split(':'))
    .find((parts) => parts[0] === name);
  return fields === undefined ? null : { uid: Number(fields[2]), gid: Number(fields[3]) };
}
