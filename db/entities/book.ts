import { Column, Entity, PrimaryColumn, PrimaryGeneratedColumn } from 'typeorm';
import type { BasisTerms } from '../../api/contract/house';
import type { BasisState } from '../../api/domain/vocabulary';

@Entity('bases')
export class BasisRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('integer') number!: number;
  @Column('text', { default: 'draft' }) state!: BasisState;
  @Column('jsonb') terms!: BasisTerms;
  @Column('uuid', { name: 'created_by' }) createdBy!: string;
  @Column('timestamptz', { name: 'created_at', default: () => 'now()' }) createdAt!: Date;
  @Column('uuid', { name: 'released_by', nullable: true }) releasedBy!: string | null;
  @Column('timestamptz', { name: 'released_at', nullable: true }) releasedAt!: Date | null;
}

@Entity('zones')
export class ZoneRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') name!: string;
  @Column('text', { array: true }) perils!: string[];
  @Column('text', { array: true }) regions!: string[];
  @Column('numeric', { precision: 20, scale: 4 }) capacity!: string;
}

@Entity('zone_uses')
export class ZoneUseRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('uuid', { name: 'zone_id' }) zoneId!: string;
  @Column('uuid', { name: 'quote_id', nullable: true }) quoteId!: string | null;
  @Column('uuid', { name: 'contract_id', nullable: true }) contractId!: string | null;
  @Column('numeric', { precision: 20, scale: 4 }) amount!: string;
  @Column('timestamptz', { name: 'taken_at', default: () => 'now()' }) takenAt!: Date;
  @Column('timestamptz', { name: 'released_at', nullable: true }) releasedAt!: Date | null;
}

@Entity('book_versions')
export class BookVersionRow {
  @PrimaryColumn('integer') number!: number;
  @Column('text') cause!: string;
  @Column('uuid', { name: 'contract_id', nullable: true }) contractId!: string | null;
  @Column('timestamptz', { default: () => 'now()' }) at!: Date;
}

@Entity('contracts')
export class ContractRow {
  @PrimaryGeneratedColumn('uuid') id!: string;
  @Column('text') name!: string;
  @Column('uuid', { name: 'cedant_id' }) cedantId!: string;
  @Column('uuid', { name: 'broker_firm_id' }) brokerFirmId!: string;
  @Column('char', { length: 3 }) currency!: string;
  @Column('date', { name: 'inception_on' }) inceptionOn!: string;
  @Column('date', { name: 'expires_on' }) expiresOn!: string;
  @Column('text') origin!: 'opening book' | 'bound quote';
  @Column('uuid', { name: 'quote_id', nullable: true }) quoteId!: string | null;
  @Column('uuid', { name: 'programme_id', nullable: true }) programmeId!: string | null;
  @Column('uuid', { name: 'loss_table_ids', array: true }) lossTableIds!: string[];
  @Column('integer', { name: 'entered_in' }) enteredIn!: number;
  @Column('integer', { name: 'left_in', nullable: true }) leftIn!: number | null;
}

@Entity('contract_layers')
export class ContractLayerRow {
  @PrimaryColumn('uuid', { name: 'contract_id' }) contractId!: string;
  @PrimaryColumn('integer') position!: number;
  @Column('text', { name: 'layer_key' }) layerKey!: string;
  @Column('text') name!: string;
  @Column('numeric', { name: 'limit_amount', precision: 20, scale: 4 }) limitAmount!: string;
  @Column('numeric', { precision: 20, scale: 4 }) attachment!: string;
  @Column('numeric', { name: 'annual_deductible', precision: 20, scale: 4, default: 0 }) annualDeductible!: string;
  @Column('double precision', { array: true }) reinstatements!: number[];
  @Column('numeric', { precision: 9, scale: 8 }) brokerage!: string;
  @Column('numeric', { name: 'signed_line', precision: 9, scale: 8 }) signedLine!: string;
  @Column('numeric', { precision: 20, scale: 4 }) premium!: string;
  @Column('numeric', { name: 'remaining_limit', precision: 20, scale: 4, nullable: true }) remainingLimit!: string | null;
}
