import type { DataSource } from 'typeorm';
import type { Run, RunResult, RunSummary } from '../../api/contract/runs';
import type { ProgrammeTermsRecord } from '../../api/domain/programme/programme';
import type { Progress } from '../../api/domain/run/run';
import type { RunState } from '../../api/domain/vocabulary';
import type { RunReader } from '../../api/features/runs/port';
import type { Standing, StandingsOf } from './run-standing';

interface Row {
  id: string;
  programme_id: string;
  submission_id: string;
  programme_version: number;
  terms: ProgrammeTermsRecord;
  state: RunState;
  states: number;
  basis: { id: string; number: number };
  book_version: number;
  input_hash: string;
  result_hash: string | null;
  progress: Progress;
  attempt: number;
  error: string | null;
  started_by: { id: string; name: string };
  created_at: Date;
  started_at: Date | null;
  ended_at: Date | null;
}

const RUNS = `
  SELECT r.id, r.programme_id, p.submission_id, r.programme_version, r.terms, r.state, r.states, r.book_version, r.input_hash, r.result_hash,
    r.progress, r.attempt, r.error, r.created_at, r.started_at, r.ended_at,
    json_build_object('id', b.id, 'number', b.number) AS basis, json_build_object('id', s.id, 'name', s.name) AS started_by
  FROM runs r JOIN programmes p ON p.id = r.programme_id JOIN bases b ON b.id = r.basis_id JOIN people s ON s.id = r.started_by`;

function summaryOf(row: Row, standing: Standing | undefined): RunSummary {
  const done = row.state === 'succeeded';
  return {
    id: row.id,
    programmeId: row.programme_id,
    submissionId: row.submission_id,
    programmeVersion: row.programme_version,
    state: row.state,
    standing: done ? (standing?.standing ?? null) : null,
    moved: done ? [...(standing?.moved ?? [])] : [],
    states: row.states,
    basis: row.basis,
    bookVersion: row.book_version,
    inputHash: row.input_hash,
    resultHash: row.result_hash,
    progress: row.progress,
    attempt: row.attempt,
    error: row.error,
    startedBy: row.started_by,
    createdAt: row.created_at.toISOString(),
    startedAt: row.started_at?.toISOString() ?? null,
    endedAt: row.ended_at?.toISOString() ?? null,
  };
}

function termsOf(terms: ProgrammeTermsRecord): Run['terms'] {
  return {
    ...terms,
    lossTableIds: [...terms.lossTableIds],
    layers: terms.layers.map((layer) => ({ ...layer, reinstatements: [...layer.reinstatements] })),
  };
}

export function runReader(dataSource: DataSource, standingsOf: StandingsOf): RunReader {
  return {
    async list(programmeId) {
      const rows: Row[] = await dataSource.query(`${RUNS} WHERE r.programme_id = $1 ORDER BY r.created_at DESC, r.id`, [programmeId]);
      const standings = await standingsOf(dataSource.manager, rows.map((row) => row.id));
      return rows.map((row) => summaryOf(row, standings.get(row.id)));
    },
    async read(runId) {
      const rows: Row[] = await dataSource.query(`${RUNS} WHERE r.id = $1`, [runId]);
      const row = rows[0];
      if (row === undefined) return null;
      const results: { result: RunResult | null }[] = await dataSource.query('SELECT result FROM runs WHERE id = $1', [runId]);
      const standings = await standingsOf(dataSource.manager, [runId]);
      return { ...summaryOf(row, standings.get(runId)), terms: termsOf(row.terms), result: results[0]?.result ?? null };
    },
    payoffs: (runId) => dataSource.query('SELECT series, bytes FROM run_payoffs WHERE run_id = $1 ORDER BY position', [runId]),
  };
}
