import { Column, Entity, PrimaryGeneratedColumn } from 'typeorm';
import type { ProgrammeTermsRecord } from '../../api/domain/programme/programme';

@Entity('programmes')
export class ProgrammeRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'submission_id' }) submissionId!: string;
  @Column('jsonb') terms!: ProgrammeTermsRecord;
  @Column('integer', { default: 1 }) version!: number;
  @Column('uuid', { name: 'updated_by' }) updatedById!: string;
  @Column('timestamptz', { name: 'updated_at', default: () => 'now()' }) updatedAt!: Date;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}
