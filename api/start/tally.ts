import { z } from 'zod';

export interface Tally {
  readonly passed: number;
  readonly failed: number;
}

export interface StepResult extends Tally {
  readonly name: string;
  readonly seconds: number;
}

const jestReport = z.object({
  numPassedTests: z.number(),
  numFailedTests: z.number(),
  numPendingTests: z.number(),
  numTodoTests: z.number(),
  numRuntimeErrorTestSuites: z.number(),
  success: z.boolean(),
});

/**
 * Counts one jest run from its report. A file that could not run counts as a failed test, and so does, unless tests
 * were picked by name, one that was skipped or only promised: a test that does not run proves nothing.
 * @param report the text of jest's JSON report, or null when it left none
 */
export function countJest(report: string | null, exitCode: number, pickedByName: boolean): Tally {
  if (report === null) return { passed: 0, failed: 1 };
  const r = jestReport.parse(JSON.parse(report));
  const idle = pickedByName ? 0 : r.numPendingTests + r.numTodoTests;
  const failed = r.numFailedTests + r.numRuntimeErrorTestSuites + idle;
  // Jest may fail as a whole (a leak, a threshold) with no test to blame.
  return { passed: r.numPassedTests, failed: failed === 0 && (exitCode !== 0 || !r.success) ? 1 : failed };
}

export function sum(results: readonly Tally[]): Tally {
  return results.reduce<Tally>((a, b) => ({ passed: a.passed + b.passed, failed: a.failed + b.failed }), { passed: 0, failed: 0 });
}

/** A line for each part, and at the end, alone on its line, the one that others read. */
export function summary(results: readonly StepResult[]): string {
  const line = ({ name, seconds, passed, failed }: StepResult): string =>
    `  ${failed > 0 ? 'FAILED' : 'ok    '}  ${name.padEnd(9)} ${seconds.toFixed(1).padStart(7)} s  ${passed} passed, ${failed} failed`;
  const total = sum(results);
  return ['', ...results.map(line), '', `${total.passed} passed, ${total.failed} failed`].join('\n');
}
