import { randomUUID } from 'node:crypto';
import type { Run } from '../../api/contract/runs';
import { createDataSource } from '../../db/data-source';
import { seedDemo } from '../../db/seed/seed-demo';
import { makeDemo } from '../../fixtures/demo/make';
import { hashPassword } from '../../api/features/session/passwords';
import request from 'supertest';
import { PASSWORD, type TestApi } from './api';

type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';
export type As = (method: Method, path: string) => request.Test;

/** The demo in small, with its people signed in. */
export interface TestDesk {
  readonly as: (email: string) => As;
  readonly submissionId: string;
  readonly lossTableIds: readonly string[];
  readonly firmId: string;
}

const FIRM = 'Pell & Marchbank';
const CEDANT = 'Tidewell Mutual';

export async function openTestDesk(api: TestApi): Promise<TestDesk> {
  const demo = makeDemo(0.01);
  const hash = await hashPassword(PASSWORD);
  const dataSource = createDataSource(api.database.url, { poolSize: 1 });
  await dataSource.initialize();
  await seedDemo(dataSource, demo, () => hash);
  await dataSource.destroy();
  const tokens = new Map<string, string>();
  for (const { email } of demo.people) {
    const res = await request(api.express).post('/api/v1/tokens').send({ email, password: PASSWORD }).expect(201);
    tokens.set(email, (res.body as { accessToken: string }).accessToken);
  }
  const as = (email: string): As => (method, path) =>
    request(api.express)[method](`/api/v1${path}`).set('Authorization', `Bearer ${tokens.get(email) ?? ''}`);
  const one = async (sql: string, values: unknown[]): Promise<string> => String((await api.owner.query<{ id: string }>(sql, values)).rows[0]?.id);
  const submissionId = await one('SELECT s.id FROM submissions s JOIN cedants c ON c.id = s.cedant_id WHERE c.name = $1', [CEDANT]);
  const tables = await api.owner.query<{ id: string }>(
    'SELECT v.id FROM loss_table_versions v JOIN loss_tables t ON t.id = v.loss_table_id WHERE t.submission_id = $1',
    [submissionId],
  );
  return {
    as,
    submissionId,
    lossTableIds: tables.rows.map(({ id }) => id),
    firmId: await one('SELECT id FROM broker_firms WHERE name = $1', [FIRM]),
  };
}

export const LAYER = {
  key: 'only', name: 'Only', limit: '10000000', attachment: '5000000', annualDeductible: '0', reinstatements: [1], brokerage: 0.1, writtenLine: 0.05,
};

/** A programme with one layer and a run of it that has ended with these figures: what quotes need, without a worker. */
export async function pricedProgramme(
  api: TestApi,
  desk: TestDesk,
  una: As,
  over: { readonly writtenLine?: number; readonly technicalPremium?: number; readonly flagged?: boolean } = {},
): Promise<{ programmeId: string; runId: string }> {
  const layer = { ...LAYER, writtenLine: over.writtenLine ?? LAYER.writtenLine };
  const body = { name: `Programme ${randomUUID().slice(0, 6)}`, currency: 'EUR', inceptionOn: '2027-01-01', lossTableIds: desk.lossTableIds, layers: [layer] };
  const programme = await una('post', `/submissions/${desk.submissionId}/programmes`).send(body).expect(201);
  const programmeId = (programme.body as { id: string }).id;
  const started = await una('post', `/programmes/${programmeId}/runs`).send({ states: 10_000 }).expect(201);
  const runId = (started.body as Run).id;
  const technicalPremium = over.technicalPremium ?? 1_000_000;
  const result = {
    layers: [{ key: 'only', expectedLoss: { value: 500_000, standardError: 1 }, walkAwayPremium: { value: 950_000, standardError: 1 }, technicalPremium }],
    selfCheck: { largest: 1, flagged: over.flagged ?? false, groundUp: 0 },
  };
  await api.owner.query(`UPDATE runs SET state = 'succeeded', result = $2, result_hash = repeat('a', 64) WHERE id = $1`, [runId, JSON.stringify(result)]);
  return { programmeId, runId };
}

export const IN_A_MONTH = new Date(Date.now() + 30 * 24 * 3600 * 1000).toISOString().slice(0, 10);
