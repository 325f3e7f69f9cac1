import { BasisRow, BookVersionRow, ContractLayerRow, ContractRow, ZoneRow, ZoneUseRow } from './book';
import { CatalogueRow, CatalogueVersionRow, LossTableRow, LossTableVersionRow, SubmissionRow } from './data';
import { CapturedMailRow, MailRow } from './mail';
import {
  AuditEntryRow,
  BrokerFirmRow,
  CedantRow,
  ContactRow,
  GrantRow,
  PersonRow,
  SessionRow,
  SignInAttemptRow,
} from './people';
import { ProgrammeRow } from './programme';
import { LinkCodeRow, OrderRow, QuoteLayerRow, QuoteLinkRow, QuoteRow } from './quotes';
import { OutboxRow, RunPayoffRow, RunRow } from './runs';

type EntityClass = new () => object;

/** Every mapped table, one line an entity. */
export const ENTITIES: EntityClass[] = [
  AuditEntryRow,
  BasisRow,
  BookVersionRow,
  BrokerFirmRow,
  CapturedMailRow,
  CatalogueRow,
  CatalogueVersionRow,
  CedantRow,
  ContactRow,
  ContractLayerRow,
  ContractRow,
  GrantRow,
  LinkCodeRow,
  LossTableRow,
  LossTableVersionRow,
  MailRow,
  OrderRow,
  OutboxRow,
  PersonRow,
  ProgrammeRow,
  QuoteLayerRow,
  QuoteLinkRow,
  QuoteRow,
  RunPayoffRow,
  RunRow,
  SessionRow,
  SignInAttemptRow,
  SubmissionRow,
  ZoneRow,
  ZoneUseRow,
];
