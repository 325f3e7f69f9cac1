import type { Problem } from '../contract/common';
import { ChangedMeanwhile, Forbidden, InvalidInput, NotFound, Refused } from '../domain/shared/errors';

/** A fault of the request itself, with the status that says so. */
export class HttpProblem extends Error {
  constructor(
    readonly status: number,
    readonly title: string,
    readonly detail?: string,
    readonly members: Readonly<Record<string, unknown>> = {},
    readonly headers: Readonly<Record<string, string>> = {},
  ) {
    super(detail ?? title);
    this.name = 'HttpProblem';
  }
}

const TITLES: Readonly<Record<number, string>> = {
  400: 'The request cannot be read',
  401: 'Not signed in',
  403: 'Not allowed',
  404: 'Not found',
  409: 'Refused',
  412: 'Changed meanwhile',
  413: 'Too large',
  415: 'Unknown kind of content',
  422: 'Something in the request is not right',
  428: 'Say which version you read',
  429: 'Too many requests',
  500: 'Our error',
};

function problemOf(status: number, detail?: string, members: object = {}): Problem {
  return { type: 'about:blank', title: TITLES[status] ?? 'Error', status, ...(detail ? { detail } : {}), ...members };
}

/**
 * Turns what was thrown into problem details, or null where it is not the user's error: then it is ours.
 */
export function userProblem(error: unknown): { readonly problem: Problem; readonly headers: Readonly<Record<string, string>> } | null {
  const plain = (problem: Problem) => ({ problem, headers: {} });
  if (error instanceof HttpProblem) {
    return { problem: { ...problemOf(error.status, error.detail, error.members), title: error.title }, headers: error.headers };
  }
  if (error instanceof NotFound) return plain(problemOf(404, error.message));
  if (error instanceof Refused) return plain(problemOf(409, error.message, { reasons: error.reasons }));
  if (error instanceof InvalidInput) return plain(problemOf(422, undefined, { errors: error.errors }));
  if (error instanceof Forbidden) return plain(problemOf(403, error.message));
  if (error instanceof ChangedMeanwhile) return plain(problemOf(412, error.message));
  // What express's own parsers throw: a status of 4xx and a type.
  if (error instanceof Error && 'status' in error && typeof error.status === 'number' && error.status >= 400 && error.status < 500) {
    return plain(problemOf(error.status, error.status === 413 ? 'The request is larger than allowed.' : 'The body is not valid JSON.'));
  }
  return null;
}

export function ourProblem(errorId: string): Problem {
  return problemOf(500, 'Something went wrong on our side; nothing was half done. Quote the error id if you report it.', { errorId });
}
