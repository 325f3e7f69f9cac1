import { spawn } from 'node:child_process';
import { existsSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import type { KeptProcess } from '../../db/local/kept-process';
import type { BootstrapContext } from './context';
import { countJest, sum, summary, type StepResult, type Tally } from './tally';
import { planTests, type TestStep } from './test-plan';
import { clearTestFolder, openTestFolder, startTestServers } from './test-servers';

/** Runs a program of node_modules with its output passed through; aborting ends it and all that it started. */
function runProgram({ root, signal }: BootstrapContext, args: readonly string[], env: NodeJS.ProcessEnv): Promise<number> {
  signal.throwIfAborted();
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, args, { cwd: root, env, detached: true, stdio: ['ignore', 'inherit', 'inherit'] });
    const end = (): void => {
      if (child.pid !== undefined) process.kill(-child.pid, 'SIGTERM');
    };
    signal.addEventListener('abort', end, { once: true });
    child.once('error', reject);
    child.once('close', (code) => {
      signal.removeEventListener('abort', end);
      resolve(code ?? 1);
    });
  });
}

async function runJest(context: BootstrapContext, step: TestStep, folder: string, env: NodeJS.ProcessEnv): Promise<Tally> {
  const report = join(folder, 'report.json');
  rmSync(report, { force: true });
  const always = ['node_modules/jest/bin/jest.js', '--json', `--outputFile=${report}`];
  const code = await runProgram(context, [...always, ...step.args], env);
  const picked = step.args.some((arg) => /^(-t|--testNamePattern)/.test(arg));
  return countJest(existsSync(report) ? readFileSync(report, 'utf8') : null, code, picked);
}

async function runStep(context: BootstrapContext, step: TestStep, folder: string, env: NodeJS.ProcessEnv): Promise<Tally> {
  const verdict = (ok: boolean): Tally => ({ passed: ok ? 1 : 0, failed: ok ? 0 : 1 });
  if (step.kind === 'jest') return runJest(context, step, folder, env);
  if (step.kind === 'program') return verdict((await runProgram(context, step.args, env)) === 0);
  return context.buildScreens().then(
    () => verdict(true),
    (error: unknown) => {
      context.say(error instanceof Error ? error.message : String(error));
      return verdict(false);
    },
  );
}

/** Runs the parts one after the other on servers of this run alone, and says what passed. */
export async function run(context: BootstrapContext): Promise<number> {
  const { say, signal } = context;
  const steps = planTests(context.args);
  const results: StepResult[] = [];
  const started: KeptProcess[] = [];
  const folder = await openTestFolder(context);
  const env: NodeJS.ProcessEnv = { ...process.env, NODE_ENV: 'test', FORCE_COLOR: '0' };
  try {
    if (steps.some((step) => step.needsServers)) Object.assign(env, await startTestServers(context, folder, started));
    if (steps.some((step) => step.needsScreens) && !steps.some((step) => step.kind === 'screens')) await context.buildScreens();
    for (const step of steps) {
      say(`\n── ${step.name} ──`);
      const since = Date.now();
      const tally = await runStep(context, step, folder, env);
      signal.throwIfAborted();
      results.push({ name: step.name, seconds: (Date.now() - since) / 1000, ...tally });
    }
  } finally {
    for (const process of started.reverse()) await process.stop();
    await clearTestFolder(folder);
  }
  say(summary(results));
  return sum(results).failed === 0 ? 0 : 1;
}
