import type { Programme } from '../../contract/programmes';

export interface ProgrammeReader {
  /** In the order in which they were added. */
  list(submissionId: string): Promise<Programme[]>;
  byId(id: string): Promise<Programme | null>;
}
