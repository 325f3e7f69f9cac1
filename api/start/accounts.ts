import { z } from 'zod';

const accountsFile = z.array(z.object({ name: z.string(), email: z.string(), role: z.string(), password: z.string() }));
export type DemoAccount = z.infer<typeof accountsFile>[number];

/** Reads what the demo's seed wrote. */
export function readAccounts(json: string): readonly DemoAccount[] {
  return accountsFile.parse(JSON.parse(json));
}

/** The demo's accounts as lines to print. */
export function accountsTable(accounts: readonly DemoAccount[]): string {
  const width = (pick: (account: DemoAccount) => string): number => Math.max(0, ...accounts.map((a) => pick(a).length));
  const [email, role] = [width((a) => a.email), width((a) => a.role)];
  const lines = accounts.map((a) => `  ${a.email.padEnd(email)}  ${a.role.padEnd(role)}  ${a.password}   ${a.name}`);
  return ['Demo accounts (e-mail, role, password):', ...lines, ''].join('\n');
}
