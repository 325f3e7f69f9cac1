import type { AuditTrail } from '../../api/domain/shared/audit';
import { AuditEntryRow } from '../entities/people';
import { managerOf } from '../unit-of-work';

export const auditTrail: AuditTrail = {
  async append(transaction, record) {
    await managerOf(transaction).insert(AuditEntryRow, {
      actorId: record.actorId,
      actor: record.actor,
      action: record.action,
      subject: record.subject,
      subjectId: record.subjectId,
      fromState: record.from ?? null,
      toState: record.to ?? null,
      note: record.note ?? null,
    });
  },
};
