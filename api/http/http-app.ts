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
const YEAR_MILLISECONDS = 365 * 24 * 3600 * 1000;

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

function tooMany(windowSeconds: number, limit: number, what: string): express.RequestHandler {
  return rateLimit({
    windowMs: windowSeconds * 1000,
    limit,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    handler: (_req, _res, next) => next(new HttpProblem(429, 'Too many requests', what, {}, { 'Retry-After': String(windowSeconds) })),
  });
}

function errorHandler(log: Logger): ErrorRequestHandler {
  return (error: unknown, req: Request, res: Response, next) => {
    if (res.headersSent) {
      log.error({ route: req.method, error: error instanceof Error ? error.message : 'unknown' }, 'an answer broke off');
      next(error);
      return;
    }
    const users = userProblem(error);
    if (users !== null) {
      res.set(users.headers).status(users.problem.status).type('application/problem+json').send(JSON.stringify(users.problem));
      return;
    }
    const errorId = randomUUID();
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
  app.use(
    express.static(folder, {
      index: false,
      setHeaders: (res, path) => {
        if (/-[A-Z0-9]{8}\.\w+$/.test(path)) res.setHeader('Cache-Control', `public, max-age=${YEAR_MILLISECONDS / 1000}, immutable`);
      },
    }),
  );
  app.get('/{*path}', (req, res, next) => {
    if (req.path.startsWith('/api/') || /\.\w+$/.test(req.path)) {
      next();
      return;
    }
    res.setHeader('Cache-Control', 'no-store');
    res.type('html').send(html.replaceAll(NONCE_PLACE, String(res.locals['nonce'])));
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
  app.use('/api', express.json({ limit: '1mb' }), cookieParser());
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
