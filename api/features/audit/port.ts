import type { AuditEntry } from '../../contract/house';

export interface AuditReader {
  list(query: {
    offset: number;
    limit: number;
    subjectId?: string | undefined;
  }): Promise<{ items: AuditEntry[]; total: number }>;
}
