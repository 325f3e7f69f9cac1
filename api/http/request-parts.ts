import express, { type Request, type Response } from 'express';
import type { ZodError } from 'zod';
import type { RouteSpec } from '../contract/route';
import { InvalidInput, NotFound } from '../domain/shared/errors';
import { HttpProblem } from './problem';

type Fault = { path: string; message: string };

const json = express.json({ limit: '1mb', type: 'application/json' });

/** Reads a JSON body, which a request may leave away. */
export async function readJson(req: Request, res: Response): Promise<void> {
  const hasBody = req.headers['transfer-encoding'] !== undefined || Number(req.headers['content-length'] ?? 0) > 0;
  if (!hasBody) return;
  if (!req.is('application/json')) throw new HttpProblem(415, 'Unknown kind of content', 'Send the body as application/json.');
  await new Promise<void>((resolve, reject) => {
    json(req, res, (error: unknown) => {
      if (error === undefined || error === null) resolve();
      else reject(error instanceof Error ? error : new Error('the body could not be read'));
    });
  });
}

function faultsOf(error: ZodError, prefix: string): Fault[] {
  return error.issues.map((issue) => ({ path: [prefix, ...issue.path.map(String)].filter(Boolean).join('.'), message: issue.message }));
}

/** Text holding the character 0, which no schema refuses and no database takes. */
function nulFaults(value: unknown, path: readonly string[]): Fault[] {
  if (typeof value === 'string') return value.includes('\0') ? [{ path: path.join('.'), message: 'must not hold the character 0' }] : [];
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, member]) => nulFaults(member, [...path, key]));
}

/** An id of another shape names nothing. */
export function parseParams(spec: RouteSpec, req: Request): unknown {
  const parsed = spec.params?.safeParse(req.params);
  if (parsed && (!parsed.success || nulFaults(req.params, []).length > 0)) throw new NotFound('thing');
  return parsed?.data;
}

/** Parses query and body and reports the faults of both at once. */
export function parseBodyAndQuery(spec: RouteSpec, req: Request): { query: unknown; body: unknown } {
  const query = spec.query?.safeParse(req.query);
  const body = spec.body?.safeParse(req.body ?? {});
  const errors = [
    ...(query && !query.success ? faultsOf(query.error, 'query') : []),
    ...(body && !body.success ? faultsOf(body.error, '') : []),
    ...nulFaults(query?.data, ['query']),
    ...nulFaults(body?.data, []),
  ];
  if (errors.length > 0) throw new InvalidInput(errors);
  return { query: query?.data, body: body?.data };
}

/** Version that the client read, from If-Match; 0 where the route takes none. */
export function versionRead(spec: RouteSpec, req: Request): number {
  if (spec.edits !== 'if-match') return 0;
  const match = /^(?:W\/)?"(\d{1,9})"$/.exec(req.get('if-match') ?? '');
  if (match === null) {
    throw new HttpProblem(428, 'Say which version you read', 'Send the entity tag that you read in If-Match, so that nobody overwrites another.');
  }
  return Number(match[1]);
}

export function keyOf(req: Request): string | null {
  const key = req.get('idempotency-key') ?? null;
  if (key !== null && !/^[\w-]{8,100}$/.test(key)) {
    throw new InvalidInput([{ path: 'Idempotency-Key', message: 'must have 8 to 100 letters, digits, hyphens or underscores' }]);
  }
  return key;
}
