import { Column, Entity, PrimaryColumn, PrimaryGeneratedColumn } from 'typeorm';
import type { FrozenTerms } from '../../api/domain/quote/quote';
import type { QuoteKind, QuoteState } from '../../api/domain/vocabulary';

@Entity('quotes')
export class QuoteRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'family_id' }) familyId!: string;
  @Column('text') reference!: string;
  @Column('integer') number!: number;
  @Column('uuid', { name: 'programme_id' }) programmeId!: string;
  @Column('uuid', { name: 'submission_id' }) submissionId!: string;
  @Column('uuid', { name: 'broker_firm_id' }) brokerFirmId!: string;
  @Column('uuid', { name: 'contact_id' }) contactId!: string;
  @Column('text', { default: 'draft' }) state!: QuoteState;
  @Column('text') kind!: QuoteKind;
  @Column('uuid', { name: 'run_id' }) runId!: string;
  @Column('jsonb') terms!: FrozenTerms;
  @Column('date', { name: 'valid_until' }) validUntil!: string;
  @Column('text', { default: '' }) note!: string;
  @Column('uuid', { name: 'author_id' }) authorId!: string;
  @Column('uuid', { name: 'submitted_by', nullable: true }) submittedBy!: string | null;
  @Column('timestamptz', { name: 'submitted_at', nullable: true }) submittedAt!: Date | null;
  @Column('uuid', { name: 'decided_by', nullable: true }) decidedBy!: string | null;
  @Column('timestamptz', { name: 'decided_at', nullable: true }) decidedAt!: Date | null;
  @Column('text', { name: 'decision_note', nullable: true }) decisionNote!: string | null;
  @Column('uuid', { name: 'issued_by', nullable: true }) issuedBy!: string | null;
  @Column('timestamptz', { name: 'issued_at', nullable: true }) issuedAt!: Date | null;
  @Column('uuid', { name: 'bound_by', nullable: true }) boundBy!: string | null;
  @Column('timestamptz', { name: 'bound_at', nullable: true }) boundAt!: Date | null;
  @Column('integer', { default: 1 }) version!: number;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
  @Column('timestamptz', { name: 'updated_at', default: () => 'now()' }) updatedAt!: Date;
}

@Entity('quote_layers')
export class QuoteLayerRow {
  @PrimaryColumn('uuid', { name: 'quote_id' }) quoteId!: string;
  @PrimaryColumn('integer') position!: number;
  @Column('text', { name: 'layer_key' }) layerKey!: string;
  @Column('numeric', { precision: 20, scale: 4 }) premium!: string;
}

@Entity('orders')
export class OrderRow {
  @PrimaryColumn('uuid', { name: 'quote_id' }) quoteId!: string;
  @Column('timestamptz', { name: 'received_at', default: () => 'now()' }) receivedAt!: Date;
  @Column('uuid', { name: 'person_id', nullable: true }) personId!: string | null;
  @Column('uuid', { name: 'contact_id', nullable: true }) contactId!: string | null;
  @Column('jsonb') layers!: { key: string; orderShare: number }[];
  @Column('text', { default: '' }) note!: string;
}

@Entity('quote_links')
export class QuoteLinkRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'quote_id' }) quoteId!: string;
  @Column('uuid', { name: 'contact_id' }) contactId!: string;
  @Column('timestamptz', { name: 'expires_at' }) expiresAt!: Date;
  @Column('timestamptz', { name: 'revoked_at', nullable: true }) revokedAt!: Date | null;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}

@Entity('link_codes')
export class LinkCodeRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'link_id' }) linkId!: string;
  @Column('timestamptz', { name: 'expires_at' }) expiresAt!: Date;
  @Column('integer', { default: 0 }) attempts!: number;
  @Column('timestamptz', { name: 'used_at', nullable: true }) usedAt!: Date | null;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}
