import type { Run } from '../../api/contract/runs';
import { createDataSource, type DataSource } from '../../db/data-source';
import { openTestApi, type TestApi } from './api';
import { LAYER, openTestDesk, type As, type TestDesk } from './desk';

/** An API with the demo in small and a pool of its own, as a worker has one. */
export interface RunBench {
  readonly api: TestApi;
  readonly una: As;
  readonly dataSource: DataSource;
  programme(): Promise<string>;
  /** Starts a run of a programme of its own, where none is named. */
  run(states?: number, programmeId?: string): Promise<string>;
  read(runId: string): Promise<Run>;
  /** How many rows of each kind a run has. */
  counts(runId: string): Promise<{ starts: number; ends: number; acts: number; series: number }>;
  close(): Promise<void>;
}

export async function openRunBench(): Promise<RunBench> {
  const api = await openTestApi();
  const desk: TestDesk = await openTestDesk(api);
  const una = desk.as('una.writhe@house.example');
  const dataSource = createDataSource(api.database.url, { poolSize: 8 });
  await dataSource.initialize();
  const programme = async (): Promise<string> => {
    const body = { name: 'Bench', currency: 'EUR', inceptionOn: '2027-01-01', lossTableIds: desk.lossTableIds, layers: [LAYER] };
    return ((await una('post', `/submissions/${desk.submissionId}/programmes`).send(body).expect(201)).body as { id: string }).id;
  };
  return {
    api,
    una,
    dataSource,
    programme,
    async run(states = 10_000, programmeId) {
      const started = await una('post', `/programmes/${programmeId ?? (await programme())}/runs`).send({ states }).expect(201);
      return (started.body as Run).id;
    },
    read: async (runId) => (await una('get', `/runs/${runId}`).expect(200)).body as Run,
    async counts(runId) {
      const found = await api.owner.query<{ starts: number; ends: number; acts: number; series: number }>(
        `SELECT (SELECT count(*)::int FROM outbox WHERE subject_id = $1 AND topic = 'run.start') AS starts,
           (SELECT count(*)::int FROM outbox WHERE subject_id = $1 AND topic = 'run.ended') AS ends,
           (SELECT count(*)::int FROM audit_entries WHERE subject_id = $1 AND action = 'run started') AS acts,
           (SELECT count(*)::int FROM run_payoffs WHERE run_id = $1::uuid) AS series`,
        [runId],
      );
      return found.rows[0] ?? { starts: 0, ends: 0, acts: 0, series: 0 };
    },
    async close() {
      await dataSource.destroy();
      await api.close();
    },
  };
}
