import { existsSync, mkdirSync } from 'node:fs';
import { join } from 'node:path';
import type { Express } from 'express';
import type { Logger } from 'pino';
import { auditReader } from '../db/read-models/audit';
import { catalogueReader } from '../db/read-models/catalogues';
import { deskReader } from '../db/read-models/desk';
import { houseReader } from '../db/read-models/house';
import { postRoom } from '../db/read-models/post-room';
import { programmeReader } from '../db/read-models/programmes';
import { standingsUnder } from '../db/read-models/run-standing';
import { runReader } from '../db/read-models/runs';
import { submissionReader } from '../db/read-models/submissions';
import { createDataSource } from '../db/data-source';
import { auditTrail } from '../db/repositories/audit-trail';
import { bookRepository } from '../db/repositories/book';
import { cataloguesRepository } from '../db/repositories/catalogues';
import { firmsRepository } from '../db/repositories/firms';
import { grantsRepository } from '../db/repositories/grants';
import { lossTablesRepository } from '../db/repositories/loss-tables';
import { mailOutbox } from '../db/repositories/mails';
import { outboxRepository } from '../db/repositories/outbox';
import { peopleRepository } from '../db/repositories/people';
import { programmesRepository } from '../db/repositories/programmes';
import { quoteLinks } from '../db/repositories/quote-links';
import { quotesRepository } from '../db/repositories/quotes';
import { runsRepository } from '../db/repositories/runs';
import { sessionsRepository, signInAttempts } from '../db/repositories/sessions';
import { submissionsRepository } from '../db/repositories/submissions';
import { zonesRepository } from '../db/repositories/zones';
import { unitOfWork } from '../db/unit-of-work';
import type { Config } from './config/config';
import type { RouteSpec } from './contract/route';
import { ROUTES } from './contract/routes';
import { ENGINE_VERSION } from './domain/run/engine-version';
import type { Notice } from './domain/shared/stream';
import { registerAudit } from './features/audit/routes';
import { registerBroker } from './features/broker/routes';
import { registerCatalogues } from './features/catalogues/routes';
import { registerDesk } from './features/desk/routes';
import { registerHealth } from './features/health/routes';
import { registerHouse } from './features/house/routes';
import { registerOpenApi } from './features/openapi/routes';
import { registerPeople } from './features/people/routes';
import { registerPostRoom } from './features/post-room/routes';
import { registerProgrammes } from './features/programmes/routes';
import { registerQuotes } from './features/quotes/routes';
import { registerRuns } from './features/runs/routes';
import { firstPassword, hashPassword } from './features/session/passwords';
import { registerSession } from './features/session/routes';
import { registerStream } from './features/stream/routes';
import { registerSubmissions } from './features/submissions/routes';
import { authenticator } from './http/authenticate';
import { httpApp, newRouter } from './http/http-app';
import { refuseOtherMethods, type ApiRouter } from './http/serve';
import { clearLeftUploads, diskUploads } from './http/uploads';
import type { Notices } from './queue/notices';

export interface OpenedApp {
  readonly express: Express;
  /** Routes of the contract that no feature has bound. */
  readonly unbound: readonly string[];
  /** Ends what stays open by nature, so that the server can stop. */
  quiet(): void;
  close(): Promise<void>;
}

const SCREENS = join(__dirname, '../../ui/browser');

/** Opens the API: connects to its stores, gives each feature its ports and binds every route. */
export async function openApp(config: Config, log: Logger, notices: Notices): Promise<OpenedApp> {
  const dataSource = createDataSource(config.DATABASE_URL);
  await dataSource.initialize();
  const uploadFolder = join(config.LEANYEAR_DATA_DIR, 'uploads');
  mkdirSync(uploadFolder, { recursive: true, mode: 0o700 });
  await clearLeftUploads(uploadFolder, 3600);

  const shared = {
    people: peopleRepository(dataSource),
    sessions: sessionsRepository(dataSource),
    audit: auditTrail,
    unitOfWork: unitOfWork(dataSource),
    jwtSecret: config.JWT_SECRET,
    publicUrl: config.LEANYEAR_PUBLIC_URL,
  };
  const router: ApiRouter = {
    express: newRouter(),
    authenticate: authenticator(shared),
    uploads: diskUploads(uploadFolder, config.LEANYEAR_LARGEST_UPLOAD_MB * 1_000_000),
    bound: new Set<RouteSpec>(),
  };

  registerSession(router, {
    ...shared,
    attempts: signInAttempts(dataSource),
    demoAccountsFile: config.LEANYEAR_DEMO ? (config.LEANYEAR_DEMO_ACCOUNTS ?? join(config.LEANYEAR_DATA_DIR, 'demo-accounts.json')) : null,
  });
  registerPeople(router, {
    ...shared,
    firms: firmsRepository(dataSource),
    grants: grantsRepository(dataSource),
    firstPassword: async () => {
      const password = firstPassword();
      return { password, hash: await hashPassword(password) };
    },
  });
  const catalogues = cataloguesRepository(dataSource);
  const submissions = submissionsRepository(dataSource);
  registerCatalogues(router, { ...shared, catalogues, notices, reader: catalogueReader(dataSource), fourEyes: config.LEANYEAR_FOUR_EYES });
  registerSubmissions(router, {
    ...shared,
    catalogues,
    notices,
    submissions,
    lossTables: lossTablesRepository,
    reader: submissionReader(dataSource),
  });
  const programmes = programmesRepository(dataSource);
  registerProgrammes(router, { ...shared, notices, submissions, programmes, reader: programmeReader(dataSource) });
  const standingsOf = standingsUnder(ENGINE_VERSION);
  registerRuns(router, { ...shared, notices, programmes, submissions, runs: runsRepository(dataSource), reader: runReader(dataSource, standingsOf) });
  const deals = {
    ...shared,
    quotes: quotesRepository(dataSource, standingsOf),
    links: quoteLinks(dataSource),
    grants: grantsRepository(dataSource),
    zones: zonesRepository,
    book: bookRepository,
    mails: mailOutbox(outboxRepository),
    outbox: outboxRepository,
    linkSecret: config.LINK_SECRET,
    today: () => new Date().toISOString().slice(0, 10),
    notify: (notice: Notice) => notices.publish(notice),
  };
  registerQuotes(router, deals);
  registerBroker(router, deals);
  registerHouse(router, { house: houseReader(dataSource) });
  const streams = registerStream(router, { notices });
  registerDesk(router, { desk: deskReader(dataSource) });
  registerAudit(router, { auditReader: auditReader(dataSource) });
  registerPostRoom(router, { postRoom: postRoom(dataSource, { demo: config.LEANYEAR_DEMO }) });

  refuseOtherMethods(router);

  const outside = newRouter();
  registerHealth(outside, { checks: { database: () => dataSource.query('SELECT 1'), queue: () => notices.check() } });
  registerOpenApi(router.express, `${config.LEANYEAR_PUBLIC_URL}/api/v1`);
  const unbound = Object.entries(ROUTES).filter(([, spec]) => !router.bound.has(spec));
  return {
    express: httpApp({ config, log, api: router.express, outside, screens: existsSync(SCREENS) ? SCREENS : null }),
    unbound: unbound.map(([name]) => name),
    quiet: () => streams.close(),
    close: () => dataSource.destroy(),
  };
}
