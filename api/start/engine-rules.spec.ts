import { execFileSync } from 'node:child_process';
import { join } from 'node:path';

/** Lines that may not stand in the engine: each moves its numbers with the machine, the day or the place. */
const IMPURE = [
  'Math.exp(1);',
  'Math.pow(2, 3);',
  'Math.random();',
  'Math.ceil(1.5);',
  'Math.PI;',
  "Math['exp'](1);",
  'const { log } = Math;',
  'const m = Math;',
  '2 ** 3;',
  'let x = 2; x **= 3;',
  'Date.now();',
  'new Date();',
  'process.env;',
  'performance.now();',
  "require('fs');",
  '(1.5).toLocaleString();',
  "import('./other');",
  'globalThis.Math;',
];
const PURE = ['Math.sqrt(2);', 'Math.min(1, 2) + Math.max(1, 2) + Math.floor(1.5) + Math.abs(-1) + Math.imul(2, 3);', '2 * 3;'];

/** Asks the very configuration what it says to a file of the engine, one line at a time. */
const ASK = `
import { ESLint, Linter } from 'eslint';
const lines = JSON.parse(process.argv[1]);
const { rules } = await new ESLint().calculateConfigForFile('worker/engine/any.ts');
const kept = Object.fromEntries(Object.entries(rules).filter(([name]) => name.startsWith('no-restricted-')));
const verdicts = lines.map((line) => new Linter().verify(line, [{ rules: kept }]).map((m) => m.ruleId ?? m.message));
process.stdout.write(JSON.stringify(verdicts));
`;

describe('the linter on the engine', () => {
  const lines = [...IMPURE, ...PURE];
  let verdicts: Map<string, string[]>;
  beforeAll(() => {
    const args = ['--input-type=module', '-e', ASK, JSON.stringify(lines)];
    const answer = execFileSync(process.execPath, args, { cwd: join(__dirname, '../..'), encoding: 'utf8' });
    const all = JSON.parse(answer) as string[][];
    verdicts = new Map(lines.map((line, i) => [line, all[i] ?? ['not asked']]));
  });

  it.each(IMPURE)('refuses %s', (line) => {
    expect(verdicts.get(line)).not.toEqual([]);
    for (const rule of verdicts.get(line) ?? []) expect(rule).toMatch(/^no-restricted-(syntax|globals)$/);
  });
  it.each(PURE)('takes %s', (line) => expect(verdicts.get(line)).toEqual([]));
});
