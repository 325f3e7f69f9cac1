import { createHash } from 'node:crypto';
import { join } from 'node:path';
import { computePool } from '../../worker/compute/pool';
import { course, openWorkspace, perform, type Found } from '../../worker/engine';
import { openBrowser } from '../support/browser';
import { bundled } from './bundle';
import { sharedRun } from './shared-run';
import { valuationBytes } from './valuation-bytes';

const THREAD_FILE = join(__dirname, '../../dist/server/worker/compute/compute-thread.js');

/** By part, so that a difference says where it is. */
const hashes = (parts: Record<string, string>): Record<string, string> =>
  Object.fromEntries(Object.entries(parts).map(([part, text]) => [part, `${text.length} ${createHash('sha256').update(text).digest('hex')}`]));

async function onThreads(count: number): Promise<Record<string, string>> {
  const pool = computePool(count, THREAD_FILE);
  try {
    return hashes(valuationBytes(await pool.value(sharedRun(), new Map(), () => undefined, new AbortController().signal)));
  } finally {
    await pool.close();
  }
}

/** A fixed shuffle. */
function shuffled<A>(items: readonly A[], seed: number): A[] {
  return items
    .map((item, i) => ({ item, key: ((i + 1) * 0.6180339887498949 * seed) % 1 }))
    .sort((a, b) => a.key - b.key)
    .map(({ item }) => item);
}

describe('a run has the same bytes', () => {
  let alone: Record<string, string>;
  beforeAll(async () => {
    alone = await onThreads(1);
  }, 60_000);

  it.each([2, 3, 7])('on %p threads', async (count) => expect(await onThreads(count)).toEqual(alone), 60_000);

  it('with the tasks of every wave shuffled', () => {
    const workspace = openWorkspace(sharedRun());
    const steps = course(workspace);
    let step = steps.next();
    for (let seed = 3; step.done !== true; seed += 4) {
      const { tasks } = step.value;
      const found: Found[] = [];
      for (const place of shuffled([...tasks.keys()], seed)) {
        const task = tasks[place];
        if (task !== undefined) found[place] = perform(workspace, task);
      }
      step = steps.next(found);
    }
    expect(hashes(valuationBytes(step.value))).toEqual(alone);
  }, 120_000);

  it('in Chromium', async () => {
    const browser = await openBrowser();
    try {
      const page = await browser.context.newPage();
      await page.addScriptTag({ content: bundled('in-browser.ts', 'browser') });
      const parts = await page.evaluate(() => (globalThis as unknown as { valued: () => Record<string, string> }).valued());
      expect(hashes(parts)).toEqual(alone);
    } finally {
      await browser.close();
    }
  }, 120_000);
});
