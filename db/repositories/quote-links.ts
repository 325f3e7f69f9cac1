import type { DataSource } from 'typeorm';
import type { QuoteLinks } from '../../api/domain/quote/ports';
import { LinkCodeRow, QuoteLinkRow } from '../entities/quotes';
import { managerOf } from '../unit-of-work';

export function quoteLinks(dataSource: DataSource): QuoteLinks {
  return {
    async create(transaction, quoteId, contactId, expiresAt) {
      const { identifiers } = await managerOf(transaction).insert(QuoteLinkRow, { quoteId, contactId, expiresAt });
      return String(identifiers[0]?.['id']);
    },
    async read(linkId) {
      const row = await dataSource.manager.findOneBy(QuoteLinkRow, { id: linkId });
      if (row === null) return null;
      const { id, quoteId, contactId, expiresAt, revokedAt } = row;
      return { id, quoteId, contactId, expiresAt, revokedAt };
    },
    async revokeAll(transaction, quoteId) {
      await managerOf(transaction).query('UPDATE quote_links SET revoked_at = now() WHERE quote_id = $1 AND revoked_at IS NULL', [quoteId]);
    },
    async recentCodes(transaction, linkId) {
      const manager = managerOf(transaction);
      // The link's row is the lock under which codes are counted and made.
      await manager.query('SELECT 1 FROM quote_links WHERE id = $1 FOR UPDATE', [linkId]);
      const rows: { count: number }[] = await manager.query(
        `SELECT count(*)::int AS count FROM link_codes WHERE link_id = $1 AND created_at > now() - interval '1 hour'`,
        [linkId],
      );
      return rows[0]?.count ?? 0;
    },
    async createCode(transaction, linkId, expiresAt) {
      const { identifiers } = await managerOf(transaction).insert(LinkCodeRow, { linkId, expiresAt });
      return String(identifiers[0]?.['id']);
    },
    async tryCode(transaction, linkId, mostAttempts) {
      const [rows]: [{ id: string }[], number] = await managerOf(transaction).query(
        `UPDATE link_codes SET attempts = attempts + 1
         WHERE id = (SELECT id FROM link_codes WHERE link_id = $1 ORDER BY created_at DESC LIMIT 1 FOR UPDATE)
           AND used_at IS NULL AND expires_at > now() AND attempts < $2
         RETURNING id`,
        [linkId, mostAttempts],
      );
      return rows[0]?.id ?? null;
    },
    async useCode(transaction, codeId) {
      const [, affected]: [unknown[], number] = await managerOf(transaction).query(
        'UPDATE link_codes SET used_at = now() WHERE id = $1 AND used_at IS NULL RETURNING id',
        [codeId],
      );
      return affected === 1;
    },
  };
}
