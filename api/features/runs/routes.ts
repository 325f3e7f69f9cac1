import { cancelRun, listRuns, readPayoffs, readRun, startRun as startRunSpec, type Run } from '../../contract/runs';
import { ENGINE_VERSION } from '../../domain/run/engine-version';
import type { Runs } from '../../domain/run/run';
import { startRun } from '../../domain/run/start-run';
import type { Programmes } from '../../domain/programme/programme';
import type { AuditTrail } from '../../domain/shared/audit';
import { NotFound, Refused } from '../../domain/shared/errors';
import type { NoticeBoard } from '../../domain/shared/stream';
import type { UnitOfWork } from '../../domain/shared/transaction';
import type { Submissions } from '../../domain/submission/submission';
import { serve, type ApiRouter } from '../../http/serve';
import type { RunReader } from './port';

export interface RunDeps {
  readonly runs: Runs;
  readonly reader: RunReader;
  readonly programmes: Programmes;
  readonly submissions: Submissions;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
  readonly notices: NoticeBoard;
}

export function registerRuns(router: ApiRouter, deps: RunDeps): void {
  const { runs, reader, unitOfWork } = deps;
  const run = async (id: string): Promise<Run> => {
    const found = await reader.read(id);
    if (found === null) throw new NotFound('run');
    return found;
  };
  const tell = async (id: string, state: string) => deps.notices.publish({ topic: 'run', id, state });

  serve(router, startRunSpec, async ({ actor, params, body, idempotencyKey }) => {
    const madeBefore = async (): Promise<string | null> => {
      const before = idempotencyKey === null ? null : await runs.byKey(actor.personId, idempotencyKey);
      if (before === null) return null;
      if ((await run(before)).programmeId === params.id) return before;
      throw new Refused([{ code: 'key', message: 'This Idempotency-Key has made a run of another programme: send a new key with a new request.' }]);
    };
    const before = await madeBefore();
    if (before !== null) return run(before);
    const programme = await deps.programmes.byId(params.id);
    if (programme === null) throw new NotFound('programme');
    const id = await unitOfWork.run(async (transaction) => {
      const submission = await deps.submissions.lock(transaction, programme.submissionId);
      if (submission.state === 'closed') throw new Refused([{ code: 'closed', message: `Submission ${submission.reference} is closed; open it again first.` }]);
      // The same request may have been at work while this one waited for the submission.
      const meanwhile = await madeBefore();
      if (meanwhile !== null) return meanwhile;
      const made = await startRun(runs, ENGINE_VERSION, transaction, {
        programmeId: programme.id,
        programmeVersion: programme.version,
        terms: programme.terms,
        states: body.states ?? null,
        startedBy: actor.personId,
        idempotencyKey,
        repricesQuoteId: null,
      });
      await deps.audit.append(transaction, { actorId: actor.personId, actor: actor.name, action: 'run started', subject: 'run', subjectId: made, from: null, to: 'queued', note: programme.terms.name });
      return made;
    });
    await tell(id, 'queued');
    return run(id);
  });

  serve(router, listRuns, async ({ params }) => {
    if ((await deps.programmes.byId(params.id)) === null) throw new NotFound('programme');
    return reader.list(params.id);
  });
  serve(router, readRun, ({ params }) => run(params.id));

  serve(router, cancelRun, async ({ actor, params }) => {
    const state = await unitOfWork.run(async (transaction) => {
      const moved = await runs.cancel(transaction, params.id);
      if (moved === null) throw new NotFound('run');
      if (moved.from === moved.to && moved.to !== 'cancelling') throw new Refused([{ code: 'ended', message: `The run has ended already: it ${moved.to === 'cancelled' ? 'was cancelled' : `has ${moved.to}`}.` }]);
      await deps.audit.append(transaction, { actorId: actor.personId, actor: actor.name, action: 'run cancelled', subject: 'run', subjectId: params.id, ...moved });
      return moved.to;
    });
    await tell(params.id, state);
    return run(params.id);
  });

  serve(router, readPayoffs, async ({ params, res }) => {
    const { state } = await run(params.id);
    if (state !== 'succeeded') throw new Refused([{ code: 'run', message: 'The run has no result yet.' }]);
    const series = await reader.payoffs(params.id);
    res.setHeader('Content-Type', 'application/octet-stream');
    res.setHeader('Content-Disposition', `attachment; filename="run-${params.id}.f64"`);
    res.setHeader('X-Leanyear-Series', series.map((one) => one.series).join(','));
    res.end(Buffer.concat(series.map((one) => one.bytes)));
    return undefined;
  });
}
