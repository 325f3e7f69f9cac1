import { listAudit } from '../../contract/house';
import { serve, type ApiRouter } from '../../http/serve';
import type { AuditReader } from './port';

export function registerAudit(router: ApiRouter, deps: { readonly auditReader: AuditReader }): void {
  serve(router, listAudit, ({ query }) => deps.auditReader.list(query));
}
