import { join } from 'node:path';
import { computePool } from '../../worker/compute/pool';
import type { Valuation, ValuationInputs } from '../../worker/engine';

/** The engine as the worker runs it, compiled and on threads: far quicker than within jest, which wraps every use of Math. */
const THREAD_FILE = join(__dirname, '../../dist/server/worker/compute/compute-thread.js');

export async function valuedByEngine(inputs: ValuationInputs): Promise<Valuation> {
  const pool = computePool(2, THREAD_FILE);
  try {
    return await pool.value(inputs, new Map(), () => undefined, new AbortController().signal);
  } finally {
    await pool.close();
  }
}
