import { randomUUID } from 'node:crypto';
import type { Logger } from 'pino';
import type { Config } from '../api/config/config';
import { ENGINE_VERSION } from '../api/domain/run/engine-version';
import type { NoticeBoard } from '../api/domain/shared/stream';
import type { WakeQueue } from '../api/queue/port';
import { sealAudit } from '../db/audit-chain';
import { createDataSource, type DataSource } from '../db/data-source';
import { standingsUnder } from '../db/read-models/run-standing';
import { readRunWork } from '../db/read-models/run-work';
import { auditTrail } from '../db/repositories/audit-trail';
import { presentBookVersion } from '../db/repositories/book';
import { grantsRepository } from '../db/repositories/grants';
import { capturedMails, mailOutbox, mailStore } from '../db/repositories/mails';
import { clearOutbox, outboxRepository, relayOutbox } from '../db/repositories/outbox';
import { peopleRepository } from '../db/repositories/people';
import { programmesRepository } from '../db/repositories/programmes';
import { quotesRepository } from '../db/repositories/quotes';
import { runBlocks } from '../db/repositories/run-blocks';
import { runDesk, runsRepository } from '../db/repositories/runs';
import { zonesRepository } from '../db/repositories/zones';
import { unitOfWork } from '../db/unit-of-work';
import { ComputeAborted, computePool, THREAD_FILE } from './compute/pool';
import { repricing, type RepricingDeps } from './jobs/reprice/reprice';
import { GivenUp } from './jobs/run/port';
import { rememberingLast } from './jobs/run/remember';
import { attemptFrom, partFrom } from './jobs/run/parts';
import { blocksJob, joinJob, runJob, waitingRuns, type RunJobDeps } from './jobs/run/run-job';
import { sendMail } from './jobs/send-mail/send-mail';
import { openPostOffice } from './mail/post-office';
import { smtpSender } from './mail/smtp';
import { repeating } from './repeating';

const RELAY_MILLISECONDS = 150;
const SWEEP_MILLISECONDS = 1000;
const LAPSE_MILLISECONDS = 60_000;
const CATCH_UP_MILLISECONDS = 30_000;
const SEAL_MILLISECONDS = 500;
const CLEAR_MILLISECONDS = 3_600_000;
const MAIL_OVERDUE_SECONDS = 30;
const MOST_ATTEMPTS = 3;

export interface WorkerDeps {
  readonly config: Config;
  readonly log: Logger;
  readonly dataSource: DataSource;
  readonly queue: WakeQueue;
  readonly notices: NoticeBoard;
  /** Compiled file of a compute thread, where it is not beside this one. */
  readonly threadFile?: string;
}

/** What re-pricing needs, over one database. */
export function repricingDeps(dataSource: DataSource, notices: NoticeBoard): RepricingDeps {
  return {
    quotes: quotesRepository(dataSource, standingsUnder(ENGINE_VERSION)),
    runs: runsRepository(dataSource),
    programmes: programmesRepository(dataSource),
    grants: grantsRepository(dataSource),
    people: peopleRepository(dataSource),
    zones: zonesRepository,
    mails: mailOutbox(outboxRepository),
    audit: auditTrail,
    unitOfWork: unitOfWork(dataSource),
    engineVersion: ENGINE_VERSION,
    today: () => new Date().toISOString().slice(0, 10),
    bookVersion: () => presentBookVersion(dataSource),
    notify: (notice) => notices.publish(notice),
  };
}

export interface OpenedWorker {
  close(): Promise<void>;
}

/**
 * Everything that happens beside the requests: the relay of the outbox, the sweeper that finds what was lost, runs, mails,
 * re-pricing, lapsing and the sealing of the trail. The same in a process of its own and inside the API's.
 */
export async function openWorker(deps: WorkerDeps): Promise<OpenedWorker> {
  const { config, log, dataSource, queue, notices } = deps;
  const report = (error: unknown): string => {
    const errorId = randomUUID();
    log.error({ errorId, stack: error instanceof Error ? error.stack : String(error) }, 'trouble in the worker');
    return errorId;
  };
  const post = config.SMTP_URL === undefined ? await openPostOffice((delivery) => capturedMails(dataSource).keep(delivery)) : null;
  const sender = smtpSender(config.SMTP_URL ?? post?.url ?? '', config.LEANYEAR_MAIL_FROM);
  const computer = computePool(config.LEANYEAR_WORKER_THREADS, deps.threadFile ?? THREAD_FILE);
  const desk = runDesk(dataSource);
  const mails = mailStore(dataSource);
  const desksOwn = repricing(repricingDeps(dataSource, notices));

  const waiting = waitingRuns();
  const aborted = (error: unknown): never => {
    throw error instanceof ComputeAborted ? new GivenUp() : error;
  };
  const runDeps: RunJobDeps = {
    desk,
    blocks: runBlocks(dataSource),
    read: rememberingLast((id) => readRunWork(dataSource, id)),
    value: (inputs, known, onProgress, signal) => computer.value(inputs, known, onProgress, signal).catch(aborted),
    valueBlocks: (inputs, indexes, done, signal) => computer.blocks(inputs, indexes, done, signal).catch(aborted),
    flow: (parent, children) => queue.addFlow(parent, children),
    publish: (notice) => notices.publish(notice),
    report,
    mostAttempts: MOST_ATTEMPTS,
    waiting,
  };

  queue.work(
    {
      'run.start': (runId) => runJob(runDeps, runId),
      'run.blocks': (part) => blocksJob(runDeps, partFrom(part)),
      'run.join': (attempt) => joinJob(runDeps, attemptFrom(attempt)),
      'run.ended': (runId) => desksOwn.runEnded(runId),
      'book.moved': (version) => desksOwn.bookMoved(Number(version)),
      'mail.send': (mailId) => sendMail({ mails, sender, publicUrl: config.LEANYEAR_PUBLIC_URL, linkSecret: config.LINK_SECRET }, mailId),
    },
    (error, wake) => log.warn({ topic: wake.topic, subjectId: wake.subjectId, error: error instanceof Error ? error.message : String(error) }, 'a wake will be tried again'),
  );

  /** A wake of the sweeper is told from the last by the attempt and the moment, so that the queue takes it anew. */
  const moment = (): number => Math.floor(Date.now() / 5000);
  const loops = [
    repeating(RELAY_MILLISECONDS, report, () => relayOutbox(dataSource, (wake) => queue.add(wake))),
    repeating(SWEEP_MILLISECONDS, report, async () => {
      for (const { runId, attempt } of await desk.forsaken()) {
        await queue.add({ id: `sweep-${runId}-${attempt}-${moment()}`, topic: 'run.start', subjectId: runId });
      }
      for (const id of await mails.overdue(MAIL_OVERDUE_SECONDS)) {
        await queue.add({ id: `sweep-${id}-${moment()}`, topic: 'mail.send', subjectId: id });
      }
    }),
    repeating(LAPSE_MILLISECONDS, report, () => desksOwn.lapse()),
    repeating(CATCH_UP_MILLISECONDS, report, () => desksOwn.catchUp()),
    repeating(CLEAR_MILLISECONDS, report, () => clearOutbox(dataSource)),
  ];

  const sealer = config.SEALER_DATABASE_URL === undefined ? null : createDataSource(config.SEALER_DATABASE_URL, { poolSize: 1 });
  await sealer?.initialize();
  const sealing = sealer === null ? null : repeating(SEAL_MILLISECONDS, report, () => sealAudit(sealer));
  if (sealing === null) log.warn('SEALER_DATABASE_URL is not set: the audit trail is kept but not chained');

  return {
    async close() {
      await Promise.all(loops.map((loop) => loop.stop()));
      // A run under way is given up: it is resumed after the start, and its fence keeps this attempt out.
      await computer.close();
      await queue.close();
      await waiting.close((attempt) => desk.release(attempt));
      await sealing?.stop();
      await sealer?.destroy();
      sender.close();
      await post?.close();
    },
  };
}
