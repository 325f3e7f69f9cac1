import type { Problem } from '../contract/common';
import { FileRefused } from '../domain/files/file-problems';
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
  405: 'Not this way',
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

const PARSER_WORDS: Readonly<Record<number, string>> = {
  400: 'The body is not valid JSON, or the address is not valid.',
  413: 'The request is larger than allowed.',
  415: 'The body has an encoding or character set that is not read here; send UTF-8.',
};

/** What express's own parsers throw carries a status and is named by a type, or is a fault of the address. */
function parserStatus(error: unknown): 400 | 413 | 415 | null {
  if (!(error instanceof Error) || !('status' in error)) return null;
  if (!('type' in error) && !(error instanceof URIError)) return null;
  const { status } = error;
  return status === 400 || status === 413 || status === 415 ? status : null;
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
  if (error instanceof FileRefused) return plain({ ...problemOf(422, error.message, { report: error.report }), title: 'The file was refused' });
  if (error instanceof InvalidInput) return plain(problemOf(422, undefined, { errors: error.errors }));
  if (error instanceof Forbidden) return plain(problemOf(403, error.message));
  if (error instanceof ChangedMeanwhile) return plain(problemOf(412, error.message));
  const parser = parserStatus(error);
  return parser === null ? null : plain(problemOf(parser, PARSER_WORDS[parser]));
}

export function ourProblem(errorId: string): Problem {
  return problemOf(500, 'Something went wrong on our side; nothing was half done. Quote the error id if you report it.', { errorId });
}
