import type { NextFunction, Request, RequestHandler, Response, Router } from 'express';
import type { BodyOf, ParamsOf, QueryOf, ReplyOf, RouteSpec } from '../contract/route';
import type { Actor } from '../domain/shared/actor';
import { Forbidden } from '../domain/shared/errors';
import { HttpProblem } from './problem';
import { parseBodyAndQuery, parseParams, readJson, keyOf, versionRead } from './request-parts';
import type { UploadedFile, Uploads } from './uploads';

/** The router with what every route needs, and a note of the routes it has bound. */
export interface ApiRouter {
  readonly express: Router;
  /** Establishes who asks, or null for nobody. Throws where the credential is no good. */
  readonly authenticate: (req: Request, res: Response) => Promise<Actor | null>;
  readonly uploads: Uploads;
  readonly bound: Set<RouteSpec>;
}

type ActorOf<R extends RouteSpec> = R['access'] extends 'public' | 'link' ? null : Actor;

export interface Call<R extends RouteSpec> {
  /** Who asks: never null where the route wants a permission or a sign-in. */
  readonly actor: ActorOf<R>;
  readonly params: ParamsOf<R>;
  readonly query: QueryOf<R>;
  readonly body: BodyOf<R>;
  /** Version that the client read, from If-Match; 0 where the route takes none. */
  readonly ifMatch: number;
  readonly idempotencyKey: string | null;
  /** The uploaded file of a `file` route; removed when the answer has gone. */
  readonly file: UploadedFile;
  readonly req: Request;
  readonly res: Response;
}

/** A handler answers the reply. With entity tags the reply's own `version` becomes the tag. */
export type Handler<R extends RouteSpec> = (call: Call<R>) => Promise<ReplyOf<R>> | ReplyOf<R>;

/** Every reply goes through its schema, so that nothing leaves which the contract does not name, and a wrong one is found. */
function answer(spec: RouteSpec, res: Response, reply: unknown): void {
  if (spec.form === 'stream' || spec.form === 'bytes') return;
  if (spec.reply === undefined) {
    res.status(spec.status ?? 204).end();
    return;
  }
  const checked: unknown = spec.reply.parse(reply);
  if (spec.edits !== undefined && typeof reply === 'object' && reply !== null && 'version' in reply) {
    res.setHeader('ETag', `"${String(reply.version)}"`);
  }
  res.status(spec.status ?? 200).json(checked);
}

function allow(spec: RouteSpec, actor: Actor | null): void {
  if (spec.access === 'public' || spec.access === 'link') return;
  if (actor === null) throw new HttpProblem(401, 'Not signed in', 'Sign in first, or again: the session has ended.');
  if (spec.access !== 'signed in' && !actor.permissions.includes(spec.access)) {
    throw new Forbidden(`A person in the role of ${actor.role} may not do this (${spec.access}).`);
  }
}

/**
 * Binds a route of the contract to its handler. In this order: who asks, whether they may, only then is a body read, its
 * parts against the route's schemas, then the handler.
 */
export function serve<R extends RouteSpec>(router: ApiRouter, spec: R, handler: Handler<R>): void {
  if (router.bound.has(spec)) throw new Error(`${spec.method} ${spec.path} is bound twice`);
  router.bound.add(spec);
  const handle = async (req: Request, res: Response): Promise<void> => {
    const actor = spec.access === 'public' || spec.access === 'link' ? null : await router.authenticate(req, res);
    allow(spec, actor);
    const params = parseParams(spec, req);
    const ifMatch = versionRead(spec, req);
    const idempotencyKey = keyOf(req);
    if (spec.body !== undefined && spec.form !== 'file') await readJson(req, res);
    const file = spec.form === 'file' ? await router.uploads.receive(req, res) : null;
    try {
      const call = { actor, params, ...parseBodyAndQuery(spec, req), ifMatch, idempotencyKey, file, req, res } as unknown as Call<R>;
      answer(spec, res, await handler(call));
    } finally {
      if (file !== null) await file.remove();
    }
  };
  const handled: RequestHandler = (req: Request, res: Response, next: NextFunction) => {
    handle(req, res).catch(next);
  };
  router.express[spec.method](spec.path, handled);
}

/** Answers 405 where a path is ours but not by this method. Bind it after every route. */
export function refuseOtherMethods(router: ApiRouter): void {
  const methods = new Map<string, string[]>();
  for (const { path, method } of router.bound) methods.set(path, [...(methods.get(path) ?? []), method.toUpperCase()]);
  for (const [path, allowed] of methods) {
    router.express.all(path, (req, _res, next) => {
      next(new HttpProblem(405, 'Not this way', `${req.method} is not possible here; ${allowed.join(', ')} is.`, {}, { Allow: allowed.join(', ') }));
    });
  }
}
