import { execFileSync } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';

const ROOT = join(__dirname, '../..');

/** A small tree that breaks the rules, one file each: from, what it imports, and the rule that must catch it. */
const BROKEN: readonly (readonly [string, string, string])[] = [
  ['api/domain/a.ts', "import '../contract/a';", 'domain'],
  ['api/contract/b.ts', "import '../domain/a';", 'contract'],
  ['api/features/one/a.ts', "import '../two/a';", 'feature'],
  ['api/http/b.ts', "import '../features/two/a';", 'http'],
  ['api/queue/b.ts', "import '../http/a';", 'queue'],
  ['api/http/c.ts', "import '../../worker/jobs/a';", 'api-not-worker'],
  ['api/http/d.ts', "import '../../db/a';", 'api-not-db'],
  ['api/http/e.ts', "import 'bullmq';", 'bullmq'],
  ['api/http/f.ts', "import 'pg';", 'database-packages'],
  ['db/b.ts', "import '../api/http/a';", 'db'],
  ['db/c.ts', "import '../api/contract/a';", 'db-types-of-the-edge'],
  ['db/migrations/0001-a.ts', "import '../a';", 'migrations'],
  ['worker/engine/b.ts', "import '../jobs/a';", 'engine'],
  ['worker/engine/c.ts', "import 'node:fs';", 'engine-packages'],
  ['worker/jobs/b.ts', "import '../../db/a';", 'jobs'],
  ['worker/jobs/c.ts', "import 'nodemailer';", 'nodemailer'],
  ['worker/jobs/d.ts', "import '../mail/smtp';", 'jobs-mail-port'],
  ['worker/mail/b.ts', "import '../jobs/a';", 'mail'],
  ['worker/mail/c.ts', "import 'express';", 'server-packages'],
  ['ui/src/app/a.ts', "import '../../../api/http/a';", 'ui'],
  ['ui/src/app/f.ts', "import '@leanyear/contract/openapi';", 'no-openapi-in-the-browser'],
  ['ui/src/app/b.ts', "import '../../../worker/engine/a';", 'ui-engine'],
  ['ui/src/app/features/one/a.ts', "import '../two/a';", 'ui-features-apart'],
  ['ui/src/app/shared/a.ts', "import '../features/two/a';", 'ui-shared-below'],
  ['ui/src/app/c.ts', "import '../../../api/contract/openapi';", 'no-openapi-in-the-browser'],
  ['worker/jobs/e.ts', "import '../../test/a';", 'nobody-imports-tests'],
  ['worker/jobs/f.ts', "import './g';", 'no-cycles'],
  ['worker/jobs/h.ts', "import './nowhere';", 'resolvable'],
  ['worker/jobs/i.ts', "import './a.spec';", 'nobody-imports-specs'],
];

const SOUND: readonly (readonly [string, string])[] = [
  ...['api/contract', 'api/http', 'api/features/two', 'db', 'worker/jobs', 'worker/engine', 'test', 'ui/src/app/features/two'].map(
    (folder) => [`${folder}/a.ts`, 'export const a = 1;'] as const,
  ),
  // The other half of the circle of jobs/f, which is said once.
  ['worker/jobs/g.ts', "import './f';"],
  ['worker/jobs/a.spec.ts', 'export const a = 1;'],
  ['worker/mail/smtp.ts', "import 'nodemailer';"],
  ['api/queue/bullmq.ts', "import 'bullmq';"],
  ['api/contract/openapi.ts', "import '@asteasolutions/zod-to-openapi';"],
  ['api/start/a.ts', "import '../../worker/jobs/a'; import '../../db/a'; import '../http/a';"],
  ['db/d.ts', "import type { a } from '../api/contract/a'; import 'typeorm'; export type A = typeof a;"],
  ['worker/engine/d.ts', "import './a'; import 'jstat';"],
  ['worker/jobs/j.ts', "import '../engine/a'; import '../../api/contract/a';"],
  ['ui/src/app/d.ts', "import type { a } from '../../../worker/engine/a'; import '../../../api/contract/a'; export type A = typeof a;"],
  ['ui/src/app/e.ts', "import '@leanyear/contract/a';"],
  ['ui/src/app/price.worker.ts', "import '../../../worker/engine/a';"],
  ['test/b.ts', "import '../db/a'; import '../api/http/a';"],
];

interface Report {
  readonly summary: { readonly violations: readonly { readonly from: string; readonly rule: { readonly name: string } }[] };
}

describe('the import rules', () => {
  let folder: string;
  let found: Set<string>;
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), 'imports-'));
    for (const [name, text] of [...SOUND, ...BROKEN]) {
      mkdirSync(dirname(join(folder, name)), { recursive: true });
      writeFileSync(join(folder, name), text);
    }
    for (const name of ['.dependency-cruiser.cjs', 'tsconfig.json', 'tsconfig.imports.json', 'package.json']) cpSync(join(ROOT, name), join(folder, name));
    symlinkSync(join(ROOT, 'node_modules'), join(folder, 'node_modules'));
    const cruise = join(ROOT, 'node_modules/dependency-cruiser/bin/dependency-cruise.mjs');
    const args = [cruise, '--config', '.dependency-cruiser.cjs', '--output-type', 'json', 'api', 'db', 'worker', 'ui', 'test'];
    const report = JSON.parse(execFileSync(process.execPath, args, { cwd: folder, encoding: 'utf8' })) as Report;
    found = new Set(report.summary.violations.map(({ from, rule }) => `${from}: ${rule.name}`));
  });
  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  it.each(BROKEN)('catch %s with %s (%s)', (file, _, rule) => expect([...found]).toContain(`${file}: ${rule}`));

  it('let sound imports pass', () => {
    const sound = new Set(SOUND.map(([file]) => file));
    expect([...found].filter((violation) => sound.has(violation.split(': ')[0] ?? ''))).toEqual([]);
  });
});
