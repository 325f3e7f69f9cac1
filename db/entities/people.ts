import { Column, Entity, JoinColumn, ManyToOne, OneToMany, PrimaryColumn, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import type { Role } from '../../api/domain/vocabulary';

@Entity('broker_firms')
export class BrokerFirmRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') name!: string;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
  @OneToMany(() => ContactRow, (contact) => contact.firm) contacts!: Relation<ContactRow[]>;
}

@Entity('contacts')
export class ContactRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'firm_id' }) firmId!: string;
  @ManyToOne(() => BrokerFirmRow, (firm) => firm.contacts) @JoinColumn({ name: 'firm_id' }) firm!: Relation<BrokerFirmRow>;
  @Column('text') name!: string;
  @Column('text') email!: string;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}

@Entity('cedants')
export class CedantRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') name!: string;
  @Column('text') territory!: string;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}

@Entity('people')
export class PersonRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') name!: string;
  @Column('text') email!: string;
  @Column('text') role!: Role;
  @Column('uuid', { name: 'firm_id', nullable: true }) firmId!: string | null;
  @ManyToOne(() => BrokerFirmRow, { nullable: true }) @JoinColumn({ name: 'firm_id' }) firm!: Relation<BrokerFirmRow> | null;
  @Column('text', { name: 'password_hash', select: false }) passwordHash!: string;
  @Column('boolean', { default: true }) active!: boolean;
  @Column('integer', { default: 1 }) version!: number;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}

@Entity('sessions')
export class SessionRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'person_id' }) personId!: string;
  @Column('text') client!: 'browser' | 'bearer';
  @Column('bytea', { name: 'refresh_hash' }) refreshHash!: Buffer;
  @Column('bytea', { name: 'previous_refresh_hash', nullable: true }) previousRefreshHash!: Buffer | null;
  @Column('timestamptz', { name: 'rotated_at', default: () => 'now()' }) rotatedAt!: Date;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
  @Column('timestamptz', { name: 'expires_at' }) expiresAt!: Date;
  @Column('timestamptz', { name: 'ended_at', nullable: true }) endedAt!: Date | null;
}

@Entity('sign_in_attempts')
export class SignInAttemptRow {
  @PrimaryColumn('bytea', { name: 'account_hash' }) accountHash!: Buffer;
  @Column('integer', { default: 0 }) failures!: number;
  @Column('timestamptz', { name: 'last_failed_at', default: () => 'now()' }) lastFailedAt!: Date;
  @Column('timestamptz', { name: 'locked_until', nullable: true }) lockedUntil!: Date | null;
}

@Entity('grants')
export class GrantRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'person_id' }) personId!: string;
  @Column('uuid', { name: 'granted_by' }) grantedById!: string;
  @ManyToOne(() => PersonRow) @JoinColumn({ name: 'granted_by' }) grantedBy!: Relation<PersonRow>;
  @Column('numeric', { name: 'largest_line_amount', precision: 20, scale: 4 }) largestLineAmount!: string;
  @Column('numeric', { name: 'largest_line_share', precision: 9, scale: 8 }) largestLineShare!: string;
  @Column('numeric', { name: 'lowest_adequacy', precision: 8, scale: 6 }) lowestAdequacy!: string;
  @Column('boolean', { name: 'below_walk_away', default: false }) belowWalkAway!: boolean;
  @Column('date', { name: 'starts_on' }) startsOn!: string;
  @Column('date', { name: 'ends_on' }) endsOn!: string;
  @Column('timestamptz', { name: 'ended_at', nullable: true }) endedAt!: Date | null;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
}

@Entity('audit_entries')
export class AuditEntryRow {
  @PrimaryGeneratedColumn('identity', { type: 'bigint' }) id!: string;
  @Column('timestamptz', { default: () => 'clock_timestamp()' }) at!: Date;
  @Column('uuid', { name: 'actor_id', nullable: true }) actorId!: string | null;
  @Column('text') actor!: string;
  @Column('text') action!: string;
  @Column('text') subject!: string;
  @Column('text', { name: 'subject_id', nullable: true }) subjectId!: string | null;
  @Column('text', { name: 'from_state', nullable: true }) fromState!: string | null;
  @Column('text', { name: 'to_state', nullable: true }) toState!: string | null;
  @Column('text', { nullable: true }) note!: string | null;
}
