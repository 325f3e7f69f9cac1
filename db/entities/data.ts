import { Column, Entity, PrimaryGeneratedColumn } from 'typeorm';
import type { CatalogueState, SubmissionState } from '../../api/domain/vocabulary';

@Entity('catalogues')
export class CatalogueRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') lineage!: string;
  @Column('text') name!: string;
  @Column('text', { default: '' }) description!: string;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}

@Entity('catalogue_versions')
export class CatalogueVersionRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'catalogue_id' }) catalogueId!: string;
  @Column('integer') number!: number;
  @Column('text', { default: 'draft' }) state!: CatalogueState;
  @Column('text', { name: 'file_name' }) fileName!: string;
  @Column('text', { name: 'content_hash' }) contentHash!: string;
  @Column('integer', { name: 'event_count' }) eventCount!: number;
  @Column('double precision', { name: 'rate_per_year' }) ratePerYear!: number;
  @Column('jsonb') perils!: { peril: string; events: number; ratePerYear: number }[];
  @Column('jsonb') regions!: { region: string; events: number; ratePerYear: number }[];
  @Column('uuid', { name: 'uploaded_by' }) uploadedById!: string;
  @Column('timestamptz', { name: 'uploaded_at', default: () => 'now()' }) uploadedAt!: Date;
  @Column('uuid', { name: 'released_by', nullable: true }) releasedById!: string | null;
  @Column('timestamptz', { name: 'released_at', nullable: true }) releasedAt!: Date | null;
}

@Entity('submissions')
export class SubmissionRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') reference!: string;
  @Column('uuid', { name: 'cedant_id' }) cedantId!: string;
  @Column('uuid', { name: 'broker_firm_id' }) brokerFirmId!: string;
  @Column('uuid', { name: 'contact_id' }) contactId!: string;
  @Column('integer', { name: 'treaty_year' }) treatyYear!: number;
  @Column('date', { name: 'inception_on' }) inceptionOn!: string;
  @Column('char', { length: 3 }) currency!: string;
  @Column('text', { default: 'open' }) state!: SubmissionState;
  @Column('text', { default: '' }) note!: string;
  @Column('uuid', { name: 'owner_id' }) ownerId!: string;
  @Column('integer', { default: 1 }) version!: number;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}

@Entity('loss_tables')
export class LossTableRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') lineage!: string;
  @Column('uuid', { name: 'submission_id', nullable: true }) submissionId!: string | null;
  @Column('uuid', { name: 'catalogue_id' }) catalogueId!: string;
  @Column('text') name!: string;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}

@Entity('loss_table_versions')
export class LossTableVersionRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'loss_table_id' }) lossTableId!: string;
  @Column('integer') number!: number;
  @Column('uuid', { name: 'catalogue_version_id' }) catalogueVersionId!: string;
  @Column('char', { length: 3 }) currency!: string;
  @Column('text', { name: 'basis_note', default: '' }) basisNote!: string;
  @Column('text', { name: 'file_name' }) fileName!: string;
  @Column('text', { name: 'content_hash' }) contentHash!: string;
  @Column('integer', { name: 'row_count' }) rowCount!: number;
  @Column('double precision', { name: 'yearly_mean' }) yearlyMean!: number;
  @Column('jsonb') footprint!: { peril: string; region: string }[];
  @Column('uuid', { name: 'uploaded_by' }) uploadedById!: string;
  @Column('timestamptz', { name: 'uploaded_at', default: () => 'now()' }) uploadedAt!: Date;
}
