import { countJest, sum, summary } from './tally';
import { planTests, STEPS } from './test-plan';

const report = (numbers: Record<string, number | boolean>): string =>
  JSON.stringify({
    numPassedTests: 0,
    numFailedTests: 0,
    numPendingTests: 0,
    numTodoTests: 0,
    numRuntimeErrorTestSuites: 0,
    success: true,
    ...numbers,
  });

describe('counting a run of jest', () => {
  it('takes its own figures', () =>
    expect(countJest(report({ numPassedTests: 7, numFailedTests: 2, success: false }), 1, false)).toEqual({ passed: 7, failed: 2 }));
  it('counts a file that cannot run as a failure', () =>
    expect(countJest(report({ numPassedTests: 7, numRuntimeErrorTestSuites: 1, success: false }), 1, false).failed).toBe(1));
  it('counts skipped and promised tests as failures, unless tests were picked by name', () => {
    expect(countJest(report({ numPendingTests: 2, numTodoTests: 1 }), 0, false).failed).toBe(3);
    expect(countJest(report({ numPendingTests: 2 }), 0, true).failed).toBe(0);
  });
  it('never passes a run that left no report, or that failed as a whole', () => {
    expect(countJest(null, 0, false).failed).toBe(1);
    expect(countJest(report({ numPassedTests: 7 }), 1, false)).toEqual({ passed: 7, failed: 1 });
  });
});

describe('the summary', () => {
  it('ends with the sum, alone on its line', () => {
    const results = [
      { name: 'lint', seconds: 1, passed: 1, failed: 0 },
      { name: 'unit', seconds: 2, passed: 10, failed: 3 },
    ];
    expect(summary(results).split('\n').at(-1)).toBe('11 passed, 3 failed');
    expect(summary(results)).toMatch(/FAILED\s+unit/);
    expect(sum([])).toEqual({ passed: 0, failed: 0 });
  });
});

describe('what is run', () => {
  it('is everything without arguments', () => expect(planTests([])).toEqual(STEPS));
  it('is one file, with servers up, for a path', () => {
    const [step, ...others] = planTests(['test/db/servers.spec.ts']);
    expect(others).toEqual([]);
    expect(step).toMatchObject({ kind: 'jest', needsServers: true, needsScreens: false });
    expect(step?.args).toContain('test/db/servers.spec.ts');
    expect(planTests(['test/e2e/quote.spec.ts'])[0]?.needsScreens).toBe(true);
  });
  it('is the named parts, and jest gets the rest', () => {
    expect(planTests(['--only', 'lint,unit', 'worker/engine']).map(({ name }) => name)).toEqual(['lint', 'unit']);
    expect(planTests(['--only', 'unit', 'worker/engine'])[0]?.args).toEqual(expect.arrayContaining(['unit', 'worker/engine']));
  });
  it('is refused for an unknown part, naming those there are', () =>
    expect(() => planTests(['--only', 'units'])).toThrow(/"units".*unit, ui, server/));
});
