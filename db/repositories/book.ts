import { randomUUID } from 'node:crypto';
import type { DataSource } from 'typeorm';
import type { Book } from '../../api/domain/book/book';
import { BookVersionRow, ContractLayerRow, ContractRow } from '../entities/book';
import { managerOf } from '../unit-of-work';

export const bookRepository: Book = {
  async version(transaction) {
    const heads: { version: number }[] = await managerOf(transaction).query('SELECT version FROM book_head');
    return heads[0]?.version ?? 0;
  },
  async enter(transaction, contract, cause) {
    const manager = managerOf(transaction);
    const heads: { version: number }[] = await manager.query('SELECT version FROM book_head FOR UPDATE');
    const version = (heads[0]?.version ?? 0) + 1;
    const contractId = randomUUID();
    await manager.insert(BookVersionRow, { number: version, cause, contractId });
    const { layers, ...terms } = contract;
    await manager.insert(ContractRow, {
      ...terms,
      id: contractId,
      lossTableIds: [...contract.lossTableIds],
      origin: 'bound quote',
      enteredIn: version,
    });
    await manager.insert(
      ContractLayerRow,
      layers.map(({ terms: layer, signedLine, premium }, position) => ({
        contractId,
        position,
        layerKey: layer.key,
        name: layer.name,
        limitAmount: layer.limit,
        attachment: layer.attachment,
        annualDeductible: layer.annualDeductible,
        reinstatements: [...layer.reinstatements],
        brokerage: String(layer.brokerage),
        signedLine: String(signedLine),
        premium,
      })),
    );
    // The expiring contract is in the book as if renewed: it makes room in the same version. What was bound here stays.
    const renewed: [{ id: string }[], number] = await manager.query(
      `UPDATE contracts SET left_in = $2
       WHERE programme_id = $1 AND id <> $3 AND origin = 'opening book' AND left_in IS NULL RETURNING id`,
      [contract.programmeId, version, contractId],
    );
    await manager.query('UPDATE zone_uses SET released_at = now() WHERE contract_id = ANY($1) AND released_at IS NULL', [
      renewed[0].map(({ id }) => id),
    ]);
    await manager.query('UPDATE book_head SET version = $1', [version]);
    return { contractId, version };
  },
};

/** Version of the book as it stands; 0 while it is empty. */
export async function presentBookVersion(dataSource: DataSource): Promise<number> {
  const heads: { version: number }[] = await dataSource.query('SELECT version FROM book_head');
  return heads[0]?.version ?? 0;
}
