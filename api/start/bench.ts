import { join } from 'node:path';
import { runToEnd } from './command.cjs';
import type { BootstrapContext } from './context';

/** npm run bench: builds the measurements and runs them; their table goes into README.md. */
export async function run({ root, say, signal }: BootstrapContext): Promise<number> {
  say('Building the measurements …');
  const built = await runToEnd(process.execPath, [join(root, 'node_modules/typescript/bin/tsc'), '-p', 'tsconfig.bench.json'], { cwd: root, signal });
  if (built !== 0) return built;
  return runToEnd(process.execPath, [join(root, 'dist/bench/test/bench/main.js')], { cwd: root, signal });
}
