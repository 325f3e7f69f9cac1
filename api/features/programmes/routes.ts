import { createProgramme, listProgrammes, readProgramme, updateProgramme, type Programme } from '../../contract/programmes';
import { lossTableFaults, type Programmes, type ProgrammeTermsRecord } from '../../domain/programme/programme';
import type { Actor } from '../../domain/shared/actor';
import type { AuditTrail } from '../../domain/shared/audit';
import { InvalidInput, NotFound, Refused } from '../../domain/shared/errors';
import type { NoticeBoard } from '../../domain/shared/stream';
import type { Transaction, UnitOfWork } from '../../domain/shared/transaction';
import type { Submissions } from '../../domain/submission/submission';
import { serve, type ApiRouter } from '../../http/serve';
import type { ProgrammeReader } from './port';

export interface ProgrammeDeps {
  readonly programmes: Programmes;
  readonly submissions: Submissions;
  readonly reader: ProgrammeReader;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
  readonly notices: NoticeBoard;
}

export function registerProgrammes(router: ApiRouter, deps: ProgrammeDeps): void {
  const { programmes, submissions, reader, unitOfWork } = deps;
  const programme = async (id: string): Promise<Programme> => {
    const found = await reader.byId(id);
    if (found === null) throw new NotFound('programme');
    return found;
  };

  /** Holds the submission open and checks what only the rows can say of the terms. */
  const check = async (transaction: Transaction, submissionId: string, terms: ProgrammeTermsRecord): Promise<void> => {
    const submission = await submissions.lock(transaction, submissionId);
    if (submission.state === 'closed') {
      throw new Refused([{ code: 'closed', message: `Submission ${submission.reference} is closed; open it again first.` }]);
    }
    const faults = lossTableFaults(terms, await programmes.usableLossTables(transaction, submissionId));
    if (faults.length > 0) throw new InvalidInput(faults);
  };
  const note = (transaction: Transaction, actor: Actor, action: string, id: string, text: string): Promise<void> =>
    deps.audit.append(transaction, { actorId: actor.personId, actor: actor.name, action, subject: 'programme', subjectId: id, note: text });
  const told = async (submissionId: string, id: string): Promise<Programme> => {
    await deps.notices.publish({ topic: 'submission', id: submissionId });
    return programme(id);
  };

  serve(router, listProgrammes, async ({ params }) => {
    if ((await submissions.byId(params.id)) === null) throw new NotFound('submission');
    return reader.list(params.id);
  });

  serve(router, createProgramme, async ({ actor, params, body }) => {
    const { id } = await unitOfWork.run(async (transaction) => {
      await check(transaction, params.id, body);
      const created = await programmes.create(transaction, params.id, body, actor.personId);
      await note(transaction, actor, 'programme added', created.id, body.name);
      return created;
    });
    return told(params.id, id);
  });

  serve(router, readProgramme, ({ params }) => programme(params.id));

  serve(router, updateProgramme, async ({ actor, params, body, ifMatch }) => {
    const { submissionId } = await programme(params.id);
    await unitOfWork.run(async (transaction) => {
      await check(transaction, submissionId, body);
      await programmes.update(transaction, params.id, ifMatch, body, actor.personId);
      await note(transaction, actor, 'programme changed', params.id, `${body.name}, version ${ifMatch + 1}`);
    });
    return told(submissionId, params.id);
  });
}
