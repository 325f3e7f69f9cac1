import type { Catalogues, ReleasedCatalogue } from '../../domain/catalogue/catalogue';
import { LossFile, type LossFileRow } from '../../domain/loss-table/loss-file';
import type { LossTableRecord, LossTables, NewLossTableVersion } from '../../domain/loss-table/loss-table';
import type { Actor } from '../../domain/shared/actor';
import type { AuditTrail } from '../../domain/shared/audit';
import { InvalidInput, NotFound, Refused } from '../../domain/shared/errors';
import { lineageOf } from '../../domain/shared/lineage';
import type { Transaction, UnitOfWork } from '../../domain/shared/transaction';
import type { SubmissionRecord, Submissions } from '../../domain/submission/submission';
import { readCsv } from '../../http/csv';
import type { UploadedFile } from '../../http/uploads';

export interface LossTableDeps {
  readonly catalogues: Catalogues;
  readonly submissions: Submissions;
  readonly lossTables: LossTables;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
}

export interface LossTableForm {
  readonly name: string;
  readonly catalogueId: string;
  readonly currency: string;
  readonly basisNote: string;
}

/** What later steps need of the rows: numbers for names, the yearly mean, the places touched. */
function measured(rows: readonly LossFileRow[], catalogue: ReleasedCatalogue): Pick<NewLossTableVersion, 'rows' | 'yearlyMean' | 'footprint'> {
  const footprint = new Map<string, { peril: string; region: string }>();
  let yearlyMean = 0;
  const stored = rows.map(({ event, ...losses }) => {
    const known = catalogue.events.get(event);
    if (known === undefined) throw new Error('an event has passed that the catalogue does not know');
    yearlyMean += known.ratePerYear * losses.meanLoss;
    const { peril, region } = known;
    if (losses.meanLoss > 0) footprint.set(JSON.stringify([peril, region]), { peril, region });
    return { eventNo: known.eventNo, ...losses };
  });
  return { rows: stored, yearlyMean, footprint: [...footprint.values()] };
}

async function releasedOrSaid(deps: LossTableDeps, catalogueId: string): Promise<ReleasedCatalogue> {
  const released = await deps.catalogues.released(catalogueId).catch((error: unknown) => {
    if (error instanceof NotFound) throw new InvalidInput([{ path: 'catalogueId', message: 'is not a known event catalogue' }]);
    throw error;
  });
  if (released === null) {
    throw new Refused([{ code: 'no released catalogue', message: 'No version of this event catalogue is released. An actuary uploads and releases one first.' }]);
  }
  return released;
}

function refuseWhereClosed(submission: SubmissionRecord): void {
  if (submission.state === 'closed') {
    throw new Refused([{ code: 'closed', message: `Submission ${submission.reference} is closed; open it again first.` }]);
  }
}

function refuseTheSame(table: LossTableRecord, version: { contentHash: string; catalogueVersionId: string; currency: string; basisNote: string }): void {
  const { newest } = table;
  if (
    newest?.contentHash === version.contentHash &&
    newest.catalogueVersionId === version.catalogueVersionId &&
    newest.currency === version.currency &&
    newest.basisNote === version.basisNote
  ) {
    throw new Refused([{ code: 'same file', message: `Version ${newest.number} is this very file already, on the same catalogue and basis.` }]);
  }
}

/**
 * Reads a loss table's file against the released version of its catalogue and stores it, whole or not at all. The same
 * name on the same submission makes a new version.
 * @throws FileRefused with every problem of the file
 */
export async function uploadLossTable(deps: LossTableDeps, actor: Actor, submissionId: string, form: LossTableForm, file: UploadedFile): Promise<string> {
  const known = await deps.submissions.byId(submissionId);
  if (known === null) throw new NotFound('submission');
  refuseWhereClosed(known);
  const catalogue = await releasedOrSaid(deps, form.catalogueId);
  const judge = new LossFile((event) => catalogue.events.has(event), `${catalogue.name}, version ${catalogue.number}`);
  const { value, contentHash } = await readCsv(file.path, file.originalName, judge);
  const version = {
    ...measured(value, catalogue),
    catalogueVersionId: catalogue.versionId,
    currency: form.currency,
    basisNote: form.basisNote,
    fileName: file.originalName,
    contentHash,
    uploadedBy: actor.personId,
  };
  return deps.unitOfWork.run(async (transaction) => {
    const submission = await deps.submissions.lock(transaction, submissionId);
    refuseWhereClosed(submission);
    const tableId = await tableOf(deps, transaction, submission, form, version);
    const { id, number } = await deps.lossTables.addVersion(transaction, tableId, version);
    await deps.audit.append(transaction, {
      actorId: actor.personId,
      actor: actor.name,
      action: 'loss table uploaded',
      subject: 'loss table',
      subjectId: id,
      note: `${submission.reference}, ${form.name}, version ${number}, ${version.rows.length} rows, sha-256 ${contentHash}`,
    });
    return id;
  });
}

async function tableOf(
  deps: LossTableDeps,
  transaction: Transaction,
  submission: SubmissionRecord,
  form: LossTableForm,
  version: NewLossTableVersion,
): Promise<string> {
  const table = await deps.lossTables.byName(transaction, submission.id, form.name);
  if (table === null) {
    const lineage = lineageOf(submission.reference, form.name);
    const created = await deps.lossTables.create(transaction, { submissionId: submission.id, catalogueId: form.catalogueId, name: form.name, lineage });
    return created.id;
  }
  if (table.catalogueId !== form.catalogueId) {
    throw new InvalidInput([{ path: 'name', message: 'is a table on another event catalogue; give this one another name' }]);
  }
  refuseTheSame(table, version);
  return table.id;
}
