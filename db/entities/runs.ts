import { Column, Entity, PrimaryColumn, PrimaryGeneratedColumn } from 'typeorm';
import type { ProgrammeTermsRecord } from '../../api/domain/programme/programme';
import type { Progress, RunInputs } from '../../api/domain/run/run';
import type { RunState } from '../../api/domain/vocabulary';

@Entity('runs')
export class RunRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'programme_id' }) programmeId!: string;
  @Column('integer', { name: 'programme_version' }) programmeVersion!: number;
  @Column('jsonb') terms!: ProgrammeTermsRecord;
  @Column('text', { default: 'queued' }) state!: RunState;
  @Column('integer') states!: number;
  @Column('uuid', { name: 'basis_id' }) basisId!: string;
  @Column('integer', { name: 'book_version' }) bookVersion!: number;
  @Column('jsonb') inputs!: RunInputs;
  @Column('text', { name: 'input_hash' }) inputHash!: string;
  @Column('text', { name: 'engine_version' }) engineVersion!: string;
  @Column('integer', { default: 0 }) attempt!: number;
  @Column('jsonb', { default: () => `'{"done": 0, "total": 1, "doing": "waiting for a worker"}'` }) progress!: Progress;
  @Column('timestamptz', { name: 'heartbeat_at', nullable: true }) heartbeatAt!: Date | null;
  @Column('text', { nullable: true }) error!: string | null;
  @Column('jsonb', { nullable: true, select: false }) result!: unknown;
  @Column('text', { name: 'result_hash', nullable: true }) resultHash!: string | null;
  @Column('uuid', { name: 'reprices_quote_id', nullable: true }) repricesQuoteId!: string | null;
  @Column('text', { name: 'idempotency_key', nullable: true }) idempotencyKey!: string | null;
  @Column('uuid', { name: 'started_by' }) startedBy!: string;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
  @Column('timestamptz', { name: 'started_at', nullable: true }) startedAt!: Date | null;
  @Column('timestamptz', { name: 'ended_at', nullable: true }) endedAt!: Date | null;
}

@Entity('run_payoffs')
export class RunPayoffRow {
  @PrimaryColumn('uuid', { name: 'run_id' }) runId!: string;
  @PrimaryColumn('integer') position!: number;
  @Column('text') series!: string;
  @Column('bytea') bytes!: Buffer;
}

@Entity('outbox')
export class OutboxRow {
  @PrimaryGeneratedColumn('identity', { type: 'bigint' }) id!: string;
  @Column('text') topic!: string;
  @Column('text', { name: 'subject_id' }) subjectId!: string;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
  @Column('timestamptz', { name: 'dispatched_at', nullable: true }) dispatchedAt!: Date | null;
}
