import type { Run, RunSummary } from '../../contract/runs';

export interface RunReader {
  list(programmeId: string): Promise<RunSummary[]>;
  read(runId: string): Promise<Run | null>;
  /** Series of a run in their order: the capital share k, then Z of each layer. */
  payoffs(runId: string): Promise<{ series: string; bytes: Buffer }[]>;
}
