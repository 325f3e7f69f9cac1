import { existsSync, mkdirSync } from 'node:fs';
import { join } from 'node:path';
import type { Express } from 'express';
import type { Logger } from 'pino';
import { auditReader } from '../db/read-models/audit';
import { catalogueReader } from '../db/read-models/catalogues';
import { deskReader } from '../db/read-models/desk';
import { postRoom } from '../db/read-models/post-room';
import { programmeReader } from '../db/read-models/programmes';
import { submissionReader } from '../db/read-models/submissions';
import { createDataSource } from '../db/data-source';
import { auditTrail } from '../db/repositories/audit-trail';
import { cataloguesRepository } from '../db/repositories/catalogues';
import { firmsRepository } from '../db/repositories/firms';
import { grantsRepository } from '../db/repositories/grants';
import { lossTablesRepository } from '../db/repositories/loss-tables';
import { peopleRepository } from '../db/repositories/people';
import { programmesRepository } from '../db/repositories/programmes';
import { sessionsRepository, signInAttempts } from '../db/repositories/sessions';
import { submissionsRepository } from '../db/repositories/submissions';
import { unitOfWork } from '../db/unit-of-work';
import type { Config } from './config/config';
import type { RouteSpec } from './contract/route';
import { ROUTES } from './contract/routes';
import { registerAudit } from './features/audit/routes';
import { registerCatalogues } from './features/catalogues/routes';
import { registerDesk } from './features/desk/routes';
import { registerHealth } from './features/health/routes';
import { registerOpenApi } from './features/openapi/routes';
import { registerPeople } from './features/people/routes';
import { registerPostRoom } from './features/post-room/routes';
import { registerProgrammes } from './features/programmes/routes';
import { firstPassword, hashPassword } from './features/session/passwords';
import { registerSession } from './features/session/routes';
import { registerSubmissions } from './features/submissions/routes';
import { authenticator } from './http/authenticate';
import { httpApp, newRouter } from './http/http-app';
import { refuseOtherMethods, type ApiRouter } from './http/serve';
import { clearLeftUploads, diskUploads } from './http/uploads';
import { memoryNotices } from './queue/memory-notices';

export interface OpenedApp {
  readonly express: Express;
  /** Routes of the contract that no feature has bound. */
  readonly unbound: readonly string[];
  close(): Promise<void>;
}

const SCREENS = join(__dirname, '../../ui/browser');

/** Opens the API: connects to its stores, gives each feature its ports and binds every route. */
export async function openApp(config: Config, log: Logger): Promise<OpenedApp> {
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
  const notices = memoryNotices();
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
  registerProgrammes(router, { ...shared, notices, submissions, programmes: programmesRepository(dataSource), reader: programmeReader(dataSource) });
  registerDesk(router, { desk: deskReader(dataSource) });
  registerAudit(router, { auditReader: auditReader(dataSource) });
  registerPostRoom(router, { postRoom: postRoom(dataSource, { demo: config.LEANYEAR_DEMO }) });

  refuseOtherMethods(router);

  const outside = newRouter();
  registerHealth(outside, { checks: { database: () => dataSource.query('SELECT 1') } });
  registerOpenApi(router.express, `${config.LEANYEAR_PUBLIC_URL}/api/v1`);
  const unbound = Object.entries(ROUTES).filter(([, spec]) => !router.bound.has(spec));
  return {
    express: httpApp({ config, log, api: router.express, outside, screens: existsSync(SCREENS) ? SCREENS : null }),
    unbound: unbound.map(([name]) => name),
    close: () => dataSource.destroy(),
  };
}
