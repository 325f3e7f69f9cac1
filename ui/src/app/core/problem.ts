import { HttpErrorResponse } from '@angular/common/http';
import type { FileReport } from '@leanyear/contract/files';

export interface FieldFault {
  /** Place in what was sent, such as `layers.0.limit`. */
  readonly path: string;
  readonly message: string;
}

export interface Reason {
  readonly code: string;
  readonly message: string;
}

/** What a request that failed has to say, whatever it failed on. Status 0: no answer came. */
export class ProblemError extends Error {
  constructor(
    readonly status: number,
    readonly title: string,
    readonly detail: string,
    readonly errors: readonly FieldFault[] = [],
    readonly reasons: readonly Reason[] = [],
    readonly errorId: string | null = null,
    readonly report: FileReport | null = null,
    readonly retryAfterSeconds: number | null = null,
    /** The server's answer, for those who need its headers. */
    readonly answer: HttpErrorResponse | null = null,
  ) {
    super(detail === '' ? title : detail);
    this.name = 'ProblemError';
  }

  /** All it says, a sentence each: every reason, or every fault, or what happened. */
  get words(): readonly string[] {
    const said = this.reasons.length > 0 ? this.reasons : this.errors;
    return said.length > 0 ? said.map((one) => one.message) : [this.message];
  }
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null;
}

function textOf(value: unknown): string {
  return typeof value === 'string' ? value : '';
}

/** The error's body: an object where JSON was asked for, text where a file or a stream was. */
function bodyOf(answer: HttpErrorResponse): Record<string, unknown> {
  if (isRecord(answer.error)) return answer.error;
  if (typeof answer.error !== 'string') return {};
  try {
    const parsed: unknown = JSON.parse(answer.error);
    return isRecord(parsed) ? parsed : {};
  } catch {
    return {};
  }
}

function pairsOf<K extends string>(value: unknown, key: K): ({ message: string } & Record<K, string>)[] {
  if (!Array.isArray(value)) return [];
  return value
    .filter(isRecord)
    .map(
      (one) =>
        ({ [key]: textOf(one[key]), message: textOf(one['message']) }) as { message: string } & Record<
          K,
          string
        >,
    );
}

/** Reads problem details (RFC 9457) out of a failed answer; says so in words where none came. */
export function problemOf(answer: HttpErrorResponse): ProblemError {
  if (answer.status === 0) {
    return new ProblemError(
      0,
      'No connection',
      'The desk cannot be reached. Nothing was lost: try again once you are connected.',
    );
  }
  const body = bodyOf(answer);
  const wait = Number(answer.headers.get('Retry-After') ?? '');
  return new ProblemError(
    answer.status,
    textOf(body['title']) || 'The request failed',
    textOf(body['detail']),
    pairsOf(body['errors'], 'path'),
    pairsOf(body['reasons'], 'code'),
    textOf(body['errorId']) || null,
    isRecord(body['report']) ? (body['report'] as unknown as FileReport) : null,
    wait > 0 ? wait : null,
    answer,
  );
}

/** Whatever was thrown, as a problem that can be shown. */
export function asProblem(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error;
  if (error instanceof HttpErrorResponse) return problemOf(error);
  // Angular wraps what is not an Error in one that names it as its cause.
  if (error instanceof Error && error.cause instanceof ProblemError) return error.cause;
  return new ProblemError(
    -1,
    'Something went wrong on this page',
    error instanceof Error ? error.message : String(error),
  );
}
