import { HttpErrorResponse, HttpHeaders } from '@angular/common/http';
import { asProblem, problemOf } from './problem';

const answer = (status: number, error: unknown, headers = {}): HttpErrorResponse =>
  new HttpErrorResponse({ status, error, headers: new HttpHeaders(headers) });

describe('a failed answer', () => {
  it('brings every fault at its place and every reason', () => {
    const problem = problemOf(
      answer(422, {
        title: 'Not right',
        detail: 'See below.',
        errors: [{ path: 'layers.0.limit', message: 'must be above 0' }],
        reasons: [{ code: 'a', message: 'b' }],
        errorId: 'e-1',
      }),
    );
    expect(problem).toMatchObject({
      status: 422,
      title: 'Not right',
      message: 'See below.',
      errorId: 'e-1',
      errors: [{ path: 'layers.0.limit', message: 'must be above 0' }],
      reasons: [{ code: 'a', message: 'b' }],
    });
  });

  it('is read from text too, as uploads and streams bring it', () => {
    expect(problemOf(answer(409, '{"title":"Refused","detail":"Not now."}')).message).toBe('Not now.');
    expect(problemOf(answer(502, '<html>gateway</html>'))).toMatchObject({
      status: 502,
      message: 'The request failed',
    });
  });

  it('says so when none came, and how long to wait when told', () => {
    expect(problemOf(answer(0, null)).title).toBe('No connection');
    expect(problemOf(answer(429, {}, { 'Retry-After': '60' })).retryAfterSeconds).toBe(60);
  });

  it('is found inside what Angular wraps around it', () => {
    const problem = problemOf(answer(404, {}));
    expect(asProblem(new Error('Resource returned an error', { cause: problem }))).toBe(problem);
    expect(asProblem(new TypeError('x is not a function')).status).toBe(-1);
  });
});
