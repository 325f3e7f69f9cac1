import { cpus } from 'node:os';

/** One part of `npm test`. A static part counts as one test, a jest project as the tests in it. */
export interface TestStep {
  readonly name: string;
  readonly kind: 'program' | 'screens' | 'jest';
  readonly args: readonly string[];
  readonly needsServers: boolean;
  readonly needsScreens: boolean;
}

const program = (name: string, ...args: string[]): TestStep => ({
  name,
  kind: 'program',
  args,
  needsServers: false,
  needsScreens: false,
});

const jestProject = (name: string, needs: { servers?: boolean; screens?: boolean; alone?: boolean } = {}): TestStep => ({
  name,
  kind: 'jest',
  // Browsers and killed servers want the machine to themselves; the rest runs on as many cores as there are.
  args: ['--selectProjects', name, needs.alone === true ? '--runInBand' : `--maxWorkers=${Math.max(1, cpus().length)}`],
  needsServers: needs.servers ?? false,
  needsScreens: needs.screens ?? false,
});

export const STEPS: readonly TestStep[] = [
  program('lint', 'node_modules/eslint/bin/eslint.js', '.', '--max-warnings', '0'),
  program('imports', 'node_modules/dependency-cruiser/bin/dependency-cruise.mjs', '--config', '.dependency-cruiser.cjs', 'api', 'db', 'worker', 'ui', 'fixtures', 'test'),
  program('types', 'node_modules/typescript/bin/tsc', '-p', 'tsconfig.json', '--noEmit'),
  program('types-ui', 'node_modules/typescript/bin/tsc', '-p', 'ui/tsconfig.json', '--noEmit'),
  { name: 'screens', kind: 'screens', args: [], needsServers: false, needsScreens: false },
  jestProject('unit'),
  jestProject('ui'),
  jestProject('server', { servers: true }),
  // Its drawing takes every core.
  jestProject('accuracy', { servers: true, alone: true }),
  jestProject('faults', { servers: true, alone: true }),
  jestProject('e2e', { servers: true, screens: true, alone: true }),
];

/**
 * What to run. `--only a,b` picks parts by name, what follows goes to jest; arguments without `--only` are one run of
 * jest over every project (a path runs that file, with servers up).
 * @throws Error naming the parts, when one is unknown
 */
export function planTests(args: readonly string[]): readonly TestStep[] {
  const at = args.indexOf('--only');
  if (at < 0 && args.length === 0) return STEPS;
  if (at < 0) {
    const screens = args.some((arg) => arg.includes('e2e'));
    return [{ name: 'jest', kind: 'jest', args: ['--runInBand', ...args], needsServers: true, needsScreens: screens }];
  }
  const names = (args[at + 1] ?? '').split(',');
  const rest = [...args.slice(0, at), ...args.slice(at + 2)];
  return names.map((name) => {
    const step = STEPS.find((s) => s.name === name);
    if (step === undefined) throw new Error(`There is no part "${name}"; there are: ${STEPS.map((s) => s.name).join(', ')}.`);
    return { ...step, args: step.kind === 'jest' ? [...step.args, ...rest] : step.args };
  });
}
