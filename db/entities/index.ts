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

type EntityClass = new () => object;

/** Every mapped table, one line an entity. */
export const ENTITIES: EntityClass[] = [
  AuditEntryRow,
  BrokerFirmRow,
  CapturedMailRow,
  CatalogueRow,
  CatalogueVersionRow,
  CedantRow,
  ContactRow,
  GrantRow,
  LossTableRow,
  LossTableVersionRow,
  MailRow,
  PersonRow,
  ProgrammeRow,
  SessionRow,
  SignInAttemptRow,
  SubmissionRow,
];
