import {
  createSubmission,
  listLossRows,
  listLossTables,
  listSubmissions,
  readLossTable,
  readSubmission,
  updateSubmission,
  uploadLossTable as uploadLossTableRoute,
  type LossTable,
  type SubmissionSummary,
} from '../../contract/submissions';
import { NotFound } from '../../domain/shared/errors';
import type { NoticeBoard } from '../../domain/shared/stream';
import type { SubmissionChange } from '../../domain/submission/submission';
import { serve, type ApiRouter } from '../../http/serve';
import type { SubmissionReader } from './port';
import { uploadLossTable, type LossTableDeps } from './upload-loss-table';

export interface SubmissionDeps extends LossTableDeps {
  readonly reader: SubmissionReader;
  readonly notices: NoticeBoard;
}

/** What is to change, without the members that the request left away. */
function changeOf(body: { [Key in keyof SubmissionChange]: SubmissionChange[Key] | undefined }): SubmissionChange {
  return Object.fromEntries(Object.entries(body).filter(([, value]) => value !== undefined));
}

function changeInWords(change: SubmissionChange): string {
  const words = { contactId: 'contact', inceptionOn: 'inception', note: 'note', state: 'state' } as const;
  const changed = (Object.keys(words) as (keyof typeof words)[]).filter((key) => change[key] !== undefined);
  return changed.map((key) => (key === 'state' || key === 'inceptionOn' ? `${words[key]} ${change[key] ?? ''}` : words[key])).join(', ') || 'nothing';
}

export function registerSubmissions(router: ApiRouter, deps: SubmissionDeps): void {
  const { reader, notices } = deps;
  const summary = async (id: string): Promise<SubmissionSummary> => {
    const found = await reader.byId(id);
    if (found === null) throw new NotFound('submission');
    return found;
  };
  const lossTable = async (id: string): Promise<LossTable> => {
    const found = await reader.lossTable(id);
    if (found === null) throw new NotFound('loss table');
    return found;
  };

  serve(router, listSubmissions, () => reader.list());

  serve(router, createSubmission, async ({ actor, body }) => {
    const { id } = await deps.unitOfWork.run(async (transaction) => {
      const created = await deps.submissions.create(transaction, { ...body, ownerId: actor.personId });
      await deps.audit.append(transaction, {
        actorId: actor.personId, actor: actor.name, action: 'submission opened', subject: 'submission', subjectId: created.id, note: created.reference,
      });
      return created;
    });
    await notices.publish({ topic: 'submission', id });
    return summary(id);
  });

  serve(router, readSubmission, ({ params }) => summary(params.id));

  serve(router, updateSubmission, async ({ actor, params, body, ifMatch }) => {
    const change = changeOf(body);
    await deps.unitOfWork.run(async (transaction) => {
      await deps.submissions.update(transaction, params.id, ifMatch, change);
      await deps.audit.append(transaction, {
        actorId: actor.personId, actor: actor.name, action: 'submission changed', subject: 'submission', subjectId: params.id, note: changeInWords(change),
      });
    });
    await notices.publish({ topic: 'submission', id: params.id });
    return summary(params.id);
  });

  serve(router, listLossTables, async ({ params }) => {
    await summary(params.id);
    return reader.lossTables(params.id);
  });

  serve(router, uploadLossTableRoute, async ({ actor, params, body, file }) => {
    const id = await uploadLossTable(deps, actor, params.id, body, file);
    await notices.publish({ topic: 'submission', id: params.id });
    return lossTable(id);
  });

  serve(router, readLossTable, ({ params }) => lossTable(params.id));

  serve(router, listLossRows, async ({ params, query }) => {
    await lossTable(params.id);
    return reader.lossRows(params.id, query);
  });
}
