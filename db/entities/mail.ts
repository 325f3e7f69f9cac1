import { Column, Entity, PrimaryGeneratedColumn } from 'typeorm';
import type { MailModels } from '../../api/domain/mail/mail';
import type { MailKind, MailState } from '../../api/domain/vocabulary';

@Entity('mails')
export class MailRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') kind!: MailKind;
  @Column('uuid', { name: 'person_id', nullable: true }) personId!: string | null;
  @Column('uuid', { name: 'contact_id', nullable: true }) contactId!: string | null;
  @Column('uuid', { name: 'quote_id', nullable: true }) quoteId!: string | null;
  @Column('jsonb') model!: MailModels[MailKind];
  @Column('text') subject!: string;
  @Column('text', { name: 'message_id' }) messageId!: string;
  @Column('text', { default: 'waiting' }) state!: MailState;
  @Column('integer', { default: 0 }) attempts!: number;
  @Column('text', { name: 'last_error', nullable: true }) lastError!: string | null;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
  @Column('timestamptz', { name: 'sent_at', nullable: true }) sentAt!: Date | null;
}

@Entity('captured_mails')
export class CapturedMailRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text', { name: 'message_id' }) messageId!: string;
  @Column('text') recipient!: string;
  @Column('bytea') raw!: Buffer;
  @Column('timestamptz', { name: 'received_at', default: () => 'now()' }) receivedAt!: Date;
}
