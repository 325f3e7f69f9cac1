import { CapturedMailRow, MailRow } from './mail';
import type { EntitySchema } from 'typeorm';

type EntityClass = new () => object;

/** Every mapped table, one line an entity. */
export const ENTITIES: (EntityClass | EntitySchema)[] = [
  MailRow,
  CapturedMailRow,
];
