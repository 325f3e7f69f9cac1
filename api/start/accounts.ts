import { z } from 'zod';

const accountsFile = z.array(z.object({ name: z.string(), email: z.string(), role: z.string(), password: z.string() }));

/** The demo's accounts as lines to print. */
export function accountsTable(json: string): string {
  const accounts = accountsFile.parse(JSON.parse(json));
  const width = (pick: (a: (typeof accounts)[number]) => string): number => Math.max(0, ...accounts.map((a) => pick(a).length));
  const [email, role] = [width((a) => a.email), width((a) => a.role)];
  const lines = accounts.map((a) => `  ${a.email.padEnd(email)}  ${a.role.padEnd(role)}  ${a.password}   ${a.name}`);
  return ['Demo accounts (e-mail, role, password):', ...lines, ''].join('\n');
}
