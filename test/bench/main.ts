import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { benchEngine } from './engine';
import { say } from './machine';

const ROOT = join(__dirname, '../../../..');
const START = '<!-- engine benchmark: written by npm run bench -->';
const END = '<!-- end of the engine benchmark -->';

/** Puts the table between its marks in README.md. */
function writeTable(lines: readonly string[]): void {
  const path = join(ROOT, 'README.md');
  const text = readFileSync(path, 'utf8');
  const [from, to] = [text.indexOf(START), text.indexOf(END)];
  if (from < 0 || to < from) throw new Error('README.md lacks the marks of the benchmark’s table');
  writeFileSync(path, `${text.slice(0, from + START.length)}\n\n${lines.join('\n')}\n\n${text.slice(to)}`);
}

const { lines, missed } = benchEngine(join(ROOT, 'test/bench/comparator'));
say(['', ...lines, ''].join('\n'));
writeTable(lines);
if (missed.length > 0) {
  say(`Missed:\n${missed.map((one) => `  ${one}`).join('\n')}`);
  process.exitCode = 1;
}
