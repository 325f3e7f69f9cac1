import { randomUUID } from 'node:crypto';
import type { AuditTrail } from '../../domain/shared/audit';
import { permissionsOf, type People, type PersonRecord } from '../../domain/person/person';
import type { SessionRecord, Sessions, SignInAttempts } from '../../domain/session/session';
import type { Actor } from '../../domain/shared/actor';
import { InvalidInput } from '../../domain/shared/errors';
import type { UnitOfWork } from '../../domain/shared/transaction';
import type { Session } from '../../contract/session';
import { HttpProblem } from '../../http/problem';
import { firstRefreshToken, nextRefreshToken, refreshHash, sessionOfRefreshToken } from '../../http/refresh-tokens';
import { ABSOLUTE_SECONDS, GRACE_SECONDS, IDLE_SECONDS, accessToken, accountHash } from '../../http/tokens';
import { hashPassword, passwordFault, passwordFits } from './passwords';

export interface SessionDeps {
  readonly people: People;
  readonly sessions: Sessions;
  readonly attempts: SignInAttempts;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
  readonly jwtSecret: string;
}

export interface OpenedSession {
  readonly view: Session;
  readonly access: string;
  readonly refresh: string;
}

export function viewOf(person: PersonRecord): Session {
  const { id, name, email, role, firm } = person;
  return { person: { id, name, email, role, firm }, permissions: [...permissionsOf(role)] };
}

function lockedOut(seconds: number): HttpProblem {
  return new HttpProblem(
    429,
    'Too many attempts',
    `This account cannot be signed in to for now. Try again in ${Math.ceil(seconds / 60)} minute${seconds > 60 ? 's' : ''}.`,
    {},
    { 'Retry-After': String(Math.ceil(seconds)) },
  );
}

const wrong = (): HttpProblem => new HttpProblem(401, 'Not signed in', 'E-mail and password do not fit together.');

/** Answers the same, and takes as long, for a wrong password, an unknown account and one switched off. */
export async function signInWith(
  deps: SessionDeps,
  credentials: { email: string; password: string },
  client: 'browser' | 'bearer',
): Promise<OpenedSession> {
  const account = accountHash(credentials.email);
  const attempt = await deps.attempts.begin(account);
  if (!attempt.allowed) throw lockedOut(attempt.lockSeconds);
  const found = await deps.people.credentialsOf(credentials.email);
  const fits = await passwordFits(found?.passwordHash ?? null, credentials.password);
  if (found === null || !fits || !found.person.active) {
    await deps.unitOfWork.run((transaction) =>
      deps.audit.append(transaction, {
        actorId: null,
        actor: 'visitor',
        action: 'sign-in refused',
        subject: 'person',
        subjectId: found?.person.id ?? null,
      }),
    );
    throw attempt.lockSeconds > 0 ? lockedOut(attempt.lockSeconds) : wrong();
  }
  await deps.attempts.succeeded(account);
  const id = randomUUID();
  const refresh = firstRefreshToken(deps.jwtSecret, id);
  const session = await deps.unitOfWork.run(async (transaction) => {
    await deps.audit.append(transaction, {
      actorId: found.person.id,
      actor: found.person.name,
      action: 'sign-in',
      subject: 'person',
      subjectId: found.person.id,
    });
    return deps.sessions.open(transaction, {
      id,
      personId: found.person.id,
      client,
      refreshHash: refreshHash(refresh),
      expiresAt: new Date(Date.now() + ABSOLUTE_SECONDS * 1000),
    });
  });
  return { view: viewOf(found.person), access: accessToken(deps.jwtSecret, session), refresh };
}

async function personOf(deps: SessionDeps, session: SessionRecord): Promise<PersonRecord | null> {
  const person = await deps.people.byId(session.personId);
  return person?.active === true ? person : null;
}

/** Exchanges a refresh token; showing one that was exchanged before, beyond the grace, ends the session it belongs to. */
export async function refreshWith(deps: SessionDeps, token: string | null): Promise<OpenedSession> {
  const ended = new HttpProblem(401, 'Not signed in', 'The session has ended: sign in again.');
  const sessionId = token === null ? null : sessionOfRefreshToken(deps.jwtSecret, token);
  if (token === null || sessionId === null) throw ended;
  const next = nextRefreshToken(deps.jwtSecret, sessionId, token);
  const result = await deps.sessions.rotate(sessionId, refreshHash(token), refreshHash(next), IDLE_SECONDS, GRACE_SECONDS);
  if (result.outcome === 'unknown') throw ended;
  if (result.outcome === 'stolen') {
    await deps.unitOfWork.run((transaction) =>
      deps.audit.append(transaction, {
        actorId: null,
        actor: 'system',
        action: 'session ended: an old refresh token was shown again',
        subject: 'person',
        subjectId: result.session.personId,
      }),
    );
    throw ended;
  }
  const person = await personOf(deps, result.session);
  if (person === null) throw ended;
  return { view: viewOf(person), access: accessToken(deps.jwtSecret, result.session), refresh: next };
}

/** Ends the session that a refresh token of ours belongs to, whether or not the short access token still lives. */
export async function endSessionOf(deps: SessionDeps, token: string | null): Promise<void> {
  const sessionId = token === null ? null : sessionOfRefreshToken(deps.jwtSecret, token);
  if (sessionId !== null) await deps.sessions.end(sessionId);
}

export async function changePasswordOf(deps: SessionDeps, actor: Actor, current: string, next: string): Promise<void> {
  const account = accountHash(actor.email);
  const attempt = await deps.attempts.begin(account);
  if (!attempt.allowed) throw lockedOut(attempt.lockSeconds);
  const found = await deps.people.credentialsOf(actor.email);
  if (found === null || !(await passwordFits(found.passwordHash, current))) {
    throw new InvalidInput([{ path: 'current', message: 'is not your present password' }]);
  }
  await deps.attempts.succeeded(account);
  const fault = next === current ? 'must differ from the present one' : passwordFault(next, actor.email);
  if (fault !== null) throw new InvalidInput([{ path: 'next', message: fault }]);
  const hash = await hashPassword(next);
  await deps.unitOfWork.run(async (transaction) => {
    await deps.people.setPassword(transaction, actor.personId, hash);
    await deps.sessions.endAllOf(transaction, actor.personId, actor.sessionId);
    await deps.audit.append(transaction, {
      actorId: actor.personId,
      actor: actor.name,
      action: 'password changed',
      subject: 'person',
      subjectId: actor.personId,
    });
  });
}

