import type { LossTables, StoredLossRow } from '../../api/domain/loss-table/loss-table';
import { copyRows } from '../copy';
import { LossTableRow, LossTableVersionRow } from '../entities/data';
import { managerOf } from '../unit-of-work';
import { freeLineage } from './lineages';

const ROW_COLUMNS = ['version_id', 'row_no', 'event_no', 'mean_loss', 'sd', 'common_share', 'exposed_value'];

function* cellsOf(versionId: string, rows: readonly StoredLossRow[]): Generator<(string | number | null)[]> {
  let rowNo = 0;
  for (const { eventNo, meanLoss, sd, commonShare, exposedValue } of rows) {
    yield [versionId, rowNo, eventNo, meanLoss, sd, commonShare, exposedValue];
    rowNo += 1;
  }
}

export const lossTablesRepository: LossTables = {
  async byName(transaction, submissionId, name) {
    const manager = managerOf(transaction);
    const table = await manager.findOneBy(LossTableRow, { submissionId, name });
    if (table === null) return null;
    const newest = await manager.findOne(LossTableVersionRow, { where: { lossTableId: table.id }, order: { number: 'DESC' } });
    return { id: table.id, catalogueId: table.catalogueId, newest };
  },
  async create(transaction, { submissionId, catalogueId, name, lineage }) {
    const manager = managerOf(transaction);
    const free = await freeLineage(manager, 'loss_tables', lineage);
    const { identifiers } = await manager.insert(LossTableRow, { submissionId, catalogueId, name, lineage: free });
    return { id: String(identifiers[0]?.['id']) };
  },
  async addVersion(transaction, lossTableId, { rows, uploadedBy, footprint, ...version }) {
    const manager = managerOf(transaction);
    const newest = await manager.findOne(LossTableVersionRow, { where: { lossTableId }, order: { number: 'DESC' } });
    const number = (newest?.number ?? 0) + 1;
    const { identifiers } = await manager.insert(LossTableVersionRow, {
      ...version, lossTableId, number, rowCount: rows.length, footprint: [...footprint], uploadedById: uploadedBy,
    });
    const id = String(identifiers[0]?.['id']);
    await copyRows(manager, 'loss_rows', ROW_COLUMNS, cellsOf(id, rows));
    return { id, number };
  },
};
