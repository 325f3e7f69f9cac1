import { randomBytes, randomUUID } from 'node:crypto';
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import compression from 'compression';
import cookieParser from 'cookie-parser';
import express, { Router, type ErrorRequestHandler, type Express, type Request, type Response } from 'express';
import { rateLimit } from 'express-rate-limit';
import helmet from 'helmet';
import type { Logger } from 'pino';
import type { Config } from '../config/config';
import { HttpProblem, ourProblem, userProblem } from './problem';

const NONCE_PLACE = '__CSP_NONCE__';
const YEAR_SECONDS = 365 * 24 * 3600;

function securityHeaders(): express.RequestHandler {
  return (req, res, next) => {
    const nonce = randomBytes(16).toString('base64');
    res.locals['nonce'] = nonce;
    helmet({
      contentSecurityPolicy: {
        useDefaults: false,
        directives: {
          defaultSrc: ["'none'"],
          scriptSrc: ["'self'"],
          styleSrc: ["'self'", `'nonce-${nonce}'`],
          imgSrc: ["'self'", 'data:', 'blob:'],
          fontSrc: ["'self'"],
          connectSrc: ["'self'"],
          workerSrc: ["'self'"],
          manifestSrc: ["'self'"],
          formAction: ["'self'"],
          frameAncestors: ["'none'"],
          baseUri: ["'self'"],
        },
      },
      // On loopback the desk is plain http; the proxy that ends TLS in front of it says HSTS.
      strictTransportSecurity: false,
      referrerPolicy: { policy: 'no-referrer' },
    })(req, res, next);
  };
}

/** Gives each request an id, said to the client and in the log, where neither addresses nor bodies are kept. */
function requestLog(log: Logger): express.RequestHandler {
  return (req, res, next) => {
    const requestId = randomUUID();
    const began = process.hrtime.bigint();
    res.locals['requestId'] = requestId;
    res.setHeader('X-Request-Id', requestId);
    res.once('close', () => {
      const route: unknown = req.route;
      const path = typeof route === 'object' && route !== null && 'path' in route ? String(route.path) : null;
      const milliseconds = Number((process.hrtime.bigint() - began) / 1_000_000n);
      log.debug({ requestId, method: req.method, route: path, status: res.statusCode, milliseconds }, 'answered');
    });
    next();
  };
}

function tooMany(windowSeconds: number, limit: number, what: string): express.RequestHandler {
  return rateLimit({
    windowMs: windowSeconds * 1000,
    limit,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    // Behind a proxy that the settings do not name, its header is simply not believed.
    validate: { xForwardedForHeader: false, trustProxy: false },
    handler: (_req, _res, next) => next(new HttpProblem(429, 'Too many requests', what, {}, { 'Retry-After': String(windowSeconds) })),
  });
}

function errorHandler(log: Logger): ErrorRequestHandler {
  return (error: unknown, req: Request, res: Response, next) => {
    if (res.headersSent) {
      log.error({ errorId: String(res.locals['requestId']), error: error instanceof Error ? error.message : 'unknown' }, 'an answer broke off');
      next(error);
      return;
    }
    const users = userProblem(error);
    if (users !== null) {
      res.set(users.headers).status(users.problem.status).type('application/problem+json').send(JSON.stringify(users.problem));
      return;
    }
    const errorId = String(res.locals['requestId']);
    // The stack names code and not people; bodies, queries and paths with ids stay out of the log.
    log.error({ errorId, method: req.method, stack: error instanceof Error ? error.stack : String(error) }, 'our error');
    res.status(500).type('application/problem+json').send(JSON.stringify(ourProblem(errorId)));
  };
}

/** Serves the built screens: hashed files for ever, the page itself fresh with this answer's nonce. */
function screens(app: Express, folder: string): void {
  const page = join(folder, 'index.html');
  if (!existsSync(page)) return;
  const html = readFileSync(page, 'utf8');
  const answerPage = (_req: Request, res: Response): void => {
    res.setHeader('Cache-Control', 'no-store');
    res.type('html').send(html.replaceAll(NONCE_PLACE, String(res.locals['nonce'])));
  };
  // As a plain file it would be answered without its nonce.
  app.get('/index.html', answerPage);
  app.use(
    express.static(folder, {
      index: false,
      redirect: false,
      setHeaders: (res, path) => {
        if (/-[A-Z0-9]{8}\.\w+$/.test(path)) res.setHeader('Cache-Control', `public, max-age=${YEAR_SECONDS}, immutable`);
      },
    }),
  );
  app.get('/{*path}', (req, res, next) => {
    // A missing file is missing; the long digest after the dot of a signed link is no file's ending.
    if (req.path.startsWith('/api/') || /\.\w{1,11}$/.test(req.path)) next();
    else answerPage(req, res);
  });
}

export interface HttpAppDeps {
  readonly config: Config;
  readonly log: Logger;
  /** Routes of /api/v1. */
  readonly api: Router;
  /** Routes outside it: health. */
  readonly outside: Router;
  /** Folder of the built screens. */
  readonly screens: string | null;
}

/** Everything around the routes: headers, limits, parsers, the screens, and one way of answering errors. */
export function httpApp({ config, log, api, outside, screens: folder }: HttpAppDeps): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('etag', false);
  app.set('trust proxy', config.LEANYEAR_TRUSTED_PROXIES === 0 ? false : config.LEANYEAR_TRUSTED_PROXIES);
  app.use(requestLog(log));
  app.use(securityHeaders());
  app.use(outside);
  app.use(compression());
  app.use('/api', (_req, res, next) => {
    res.setHeader('Cache-Control', 'no-store');
    next();
  });
  app.use('/api', tooMany(60, config.LEANYEAR_RATE_LIMIT, 'Too many requests from your address; wait a minute.'));
  const signIns = tooMany(60, config.LEANYEAR_SIGN_IN_LIMIT, 'Too many attempts at signing in from your address; wait a minute.');
  app.post(['/api/v1/session', '/api/v1/tokens'], signIns);
  // A signed link's order takes a code of six digits: guessing it is bounded here too, besides the count on its own row.
  app.post('/api/v1/links/{*path}', tooMany(60, config.LEANYEAR_SIGN_IN_LIMIT, 'Too many acts on links from your address; wait a minute.'));
  app.use('/api', cookieParser());
  app.use('/api/v1', api);
  app.use('/api', (_req, _res, next) => next(new HttpProblem(404, 'Not found', 'There is no such route.')));
  if (folder !== null) screens(app, folder);
  app.use((_req, _res, next) => next(new HttpProblem(404, 'Not found', 'There is nothing at this address.')));
  app.use(errorHandler(log));
  return app;
}

export function newRouter(): Router {
  return Router({ caseSensitive: true });
}
