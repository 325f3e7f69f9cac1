import type { Catalogues } from '../../domain/catalogue/catalogue';
import { CatalogueFile } from '../../domain/catalogue/catalogue-file';
import type { Actor } from '../../domain/shared/actor';
import type { AuditTrail } from '../../domain/shared/audit';
import { Refused } from '../../domain/shared/errors';
import type { UnitOfWork } from '../../domain/shared/transaction';
import { readCsv } from '../../http/csv';
import type { UploadedFile } from '../../http/uploads';

export interface UploadDeps {
  readonly catalogues: Catalogues;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
}

/**
 * Reads a catalogue's file and stores it as a draft version, whole or not at all.
 * @throws FileRefused with every problem of the file
 */
export async function uploadVersion(deps: UploadDeps, actor: Actor, catalogueId: string, file: UploadedFile): Promise<string> {
  const { value: events, contentHash } = await readCsv(file.path, file.originalName, new CatalogueFile());
  return deps.unitOfWork.run(async (transaction) => {
    await deps.catalogues.lock(transaction, catalogueId);
    const newest = await deps.catalogues.newestVersion(transaction, catalogueId);
    if (newest?.contentHash === contentHash && newest.state !== 'withdrawn') {
      throw new Refused([{ code: 'same file', message: `Version ${newest.number} is this very file already.` }]);
    }
    const { id, number } = await deps.catalogues.addVersion(transaction, catalogueId, {
      fileName: file.originalName,
      contentHash,
      events,
      uploadedBy: actor.personId,
    });
    await deps.audit.append(transaction, {
      actorId: actor.personId,
      actor: actor.name,
      action: 'catalogue version uploaded',
      subject: 'catalogue version',
      subjectId: id,
      to: 'draft',
      note: `version ${number}, ${events.length} events, sha-256 ${contentHash}`,
    });
    return id;
  });
}
