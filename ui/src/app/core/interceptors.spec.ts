import { HttpClient, provideHttpClient, withInterceptors } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { provideLocks } from '../../testing/locks';
import { sessionOf } from '../../testing/session';
import { expiredSignIn, ownRequest, problems } from './interceptors';
import { ProblemError } from './problem';
import { SessionStore } from './session';

const signInAgain = jest.fn<Promise<boolean>, []>();
jest.mock('./sign-in-again/sign-in-again', () => ({ signInAgain: () => signInAgain() }));

const GONE = { status: 401, statusText: 'Unauthorized' };
/** Lets the promises between an answer and what follows from it run. */
const settle = (): Promise<void> => new Promise((resolve) => setTimeout(resolve, 5));

function open() {
  TestBed.configureTestingModule({
    providers: [
      provideHttpClient(withInterceptors([problems, expiredSignIn, ownRequest])),
      provideHttpClientTesting(),
    ],
  });
  const sessions = TestBed.inject(SessionStore);
  sessions.take(sessionOf('underwriter'));
  return { http: TestBed.inject(HttpClient), server: TestBed.inject(HttpTestingController), sessions };
}

describe('an expired sign-in', () => {
  beforeEach(() => {
    localStorage.clear();
    provideLocks();
    signInAgain.mockReset();
  });

  it('is renewed once for all requests that met it, and each is repeated', async () => {
    const { http, server } = open();
    const answers: unknown[] = [];
    http.get('/api/v1/desk').subscribe((answer) => answers.push(answer));
    http.get('/api/v1/book').subscribe((answer) => answers.push(answer));
    server.expectOne('/api/v1/desk').flush(null, GONE);
    server.expectOne('/api/v1/book').flush(null, GONE);
    await settle();
    server.expectOne('/api/v1/session/refresh').flush(sessionOf('underwriter'));
    await settle();
    server.expectOne('/api/v1/desk').flush('desk');
    server.expectOne('/api/v1/book').flush('book');
    expect(answers).toEqual(['desk', 'book']);
    server.verify();
  });

  it('asks for the password over the page where it cannot be renewed, and then repeats what was sent', async () => {
    const { http, server } = open();
    signInAgain.mockResolvedValue(true);
    let answer: unknown;
    http.post('/api/v1/submissions', { note: 'typed for an hour' }).subscribe((given) => (answer = given));
    server.expectOne('/api/v1/submissions').flush(null, GONE);
    await settle();
    server.expectOne('/api/v1/session/refresh').flush(null, GONE);
    await settle();
    const repeated = server.expectOne('/api/v1/submissions');
    expect(repeated.request.body).toEqual({ note: 'typed for an hour' });
    repeated.flush('kept');
    expect(answer).toBe('kept');
    expect(signInAgain).toHaveBeenCalledTimes(1);
  });

  it('fails as what it is when the person leaves, or was never signed in', async () => {
    const { http, server, sessions } = open();
    sessions.forget();
    let failure: unknown;
    http.get('/api/v1/desk').subscribe({ error: (error: unknown) => (failure = error) });
    server.expectOne('/api/v1/desk').flush(null, GONE);
    await settle();
    server.expectOne('/api/v1/session/refresh').flush(null, GONE);
    await settle();
    expect(failure).toBeInstanceOf(ProblemError);
    expect(signInAgain).not.toHaveBeenCalled();
  });
});

describe('a request of ours', () => {
  it('names itself where it acts', () => {
    const { http, server } = open();
    http.post('/api/v1/submissions', {}).subscribe();
    http.get('/api/v1/submissions').subscribe();
    const [act, read] = server.match('/api/v1/submissions');
    expect(act?.request.headers.get('X-Leanyear-Request')).toBe('1');
    expect(read?.request.headers.has('X-Leanyear-Request')).toBe(false);
  });
});
