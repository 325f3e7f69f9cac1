import type { NextFunction, Request, RequestHandler, Response, Router } from 'express';
import { z, type ZodType } from 'zod';
import type { BodyOf, ParamsOf, QueryOf, ReplyOf, RouteSpec } from '../contract/route';
import type { Actor } from '../domain/shared/actor';
import { Forbidden, InvalidInput, NotFound } from '../domain/shared/errors';
import { HttpProblem } from './problem';
import type { UploadedFile, Uploads } from './uploads';

/** The router with what every route needs, and a note of the routes it has bound. */
export interface ApiRouter {
  readonly express: Router;
  /** Establishes who asks, or null for nobody. Throws where the credential is no good. */
  readonly authenticate: (req: Request, res: Response) => Promise<Actor | null>;
  readonly uploads: Uploads;
  /** Parses replies too, so that a reply outside its contract is found before a client finds it. */
  readonly checkReplies: boolean;
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

function faultsOf(error: z.ZodError, prefix: string): { path: string; message: string }[] {
  return error.issues.map((issue) => ({ path: [prefix, ...issue.path.map(String)].filter(Boolean).join('.'), message: issue.message }));
}

/** Parses the parts of the request and reports the faults of all of them at once. */
function parseParts(spec: RouteSpec, req: Request): { params: unknown; query: unknown; body: unknown } {
  const params = spec.params?.safeParse(req.params);
  // An id of another shape names nothing.
  if (params && !params.success) throw new NotFound('thing');
  const query = spec.query?.safeParse(req.query);
  const body = spec.body?.safeParse(req.body ?? {});
  const errors = [
    ...(query && !query.success ? faultsOf(query.error, 'query') : []),
    ...(body && !body.success ? faultsOf(body.error, '') : []),
  ];
  if (errors.length > 0) throw new InvalidInput(errors);
  return { params: params?.data, query: query?.data, body: body?.data };
}

function versionRead(spec: RouteSpec, req: Request): number {
  if (spec.edits !== 'if-match') return 0;
  const match = /^(?:W\/)?"(\d{1,9})"$/.exec(req.get('if-match') ?? '');
  if (match === null) {
    throw new HttpProblem(428, 'Say which version you read', 'Send the entity tag that you read in If-Match, so that nobody overwrites another.');
  }
  return Number(match[1]);
}

function keyOf(req: Request): string | null {
  const key = req.get('idempotency-key') ?? null;
  if (key !== null && !/^[\w-]{8,100}$/.test(key)) {
    throw new InvalidInput([{ path: 'Idempotency-Key', message: 'must have 8 to 100 letters, digits, hyphens or underscores' }]);
  }
  return key;
}

function answer(spec: RouteSpec, router: ApiRouter, res: Response, reply: unknown): void {
  if (spec.form === 'stream' || spec.form === 'bytes') return;
  if (spec.reply === undefined) {
    res.status(spec.status ?? 204).end();
    return;
  }
  const checked: unknown = router.checkReplies ? (spec.reply as ZodType).parse(reply) : reply;
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
 * Binds a route of the contract to its handler. In this order: who asks, whether they may, then the request's parts
 * against the route's schemas, then the handler.
 */
export function serve<R extends RouteSpec>(router: ApiRouter, spec: R, handler: Handler<R>): void {
  if (router.bound.has(spec)) throw new Error(`${spec.method} ${spec.path} is bound twice`);
  router.bound.add(spec);
  const handle = async (req: Request, res: Response): Promise<void> => {
    const actor = spec.access === 'public' || spec.access === 'link' ? null : await router.authenticate(req, res);
    allow(spec, actor);
    const ifMatch = versionRead(spec, req);
    const file = spec.form === 'file' ? await router.uploads.receive(req, res) : null;
    try {
      const parts = parseParts(spec, req);
      const call = { actor, ...parts, ifMatch, idempotencyKey: keyOf(req), file, req, res } as unknown as Call<R>;
      answer(spec, router, res, await handler(call));
    } finally {
      if (file !== null) await file.remove();
    }
  };
  const handled: RequestHandler = (req: Request, res: Response, next: NextFunction) => {
    handle(req, res).catch(next);
  };
  router.express[spec.method](spec.path, handled);
}
