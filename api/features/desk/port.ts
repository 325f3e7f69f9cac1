import type { z } from 'zod';
import type { DeskItem, readDesk } from '../../contract/house';
import type { Actor } from '../../domain/shared/actor';

export type DeskView = z.infer<NonNullable<(typeof readDesk)['reply']>>;

export interface DeskReader {
  /** What waits for this person, oldest first, by their permissions. */
  waitingFor(actor: Actor): Promise<DeskItem[]>;
  counts(actor: Actor): Promise<DeskView['counts']>;
  /** What keeps the desk from pricing, with what to do about it. */
  missing(): Promise<string[]>;
}
