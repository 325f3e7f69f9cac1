import passport from 'passport';
import { Strategy } from 'passport-jwt';
import type { Request, Response } from 'express';
import { z } from 'zod';
import { permissionsOf, type People } from '../domain/person/person';
import type { Sessions } from '../domain/session/session';
import type { Actor } from '../domain/shared/actor';
import { accessCookieOf } from './session-cookies';
import { AUDIENCE, ISSUER } from './tokens';
import { refuseCrossSite } from './cross-site';

const claims = z.object({ sub: z.uuid(), sid: z.uuid() });

function bearerOf(req: Request): string | null {
  return /^Bearer ([\w-]+\.[\w-]+\.[\w-]+)$/.exec(req.get('authorization') ?? '')?.[1] ?? null;
}

export interface AuthenticateDeps {
  readonly people: People;
  readonly sessions: Sessions;
  readonly jwtSecret: string;
  readonly publicUrl: string;
}

/**
 * Establishes who asks, by bearer token or by cookie. The token names a session; person and role are read from their rows
 * each time, so that switching an account off acts at once.
 */
export function authenticator(deps: AuthenticateDeps): (req: Request, res: Response) => Promise<Actor | null> {
  const strategy = new Strategy(
    {
      jwtFromRequest: (req: Request) => bearerOf(req) ?? accessCookieOf(req),
      secretOrKey: deps.jwtSecret,
      issuer: ISSUER,
      audience: AUDIENCE,
      algorithms: ['HS256'],
    },
    (payload: unknown, done: (error: unknown, actor?: Actor | false) => void) => {
      actorOf(payload).then(
        (actor) => done(null, actor ?? false),
        (error: unknown) => done(error),
      );
    },
  );
  const actorOf = async (payload: unknown): Promise<Actor | null> => {
    const parsed = claims.safeParse(payload);
    if (!parsed.success) return null;
    const session = await deps.sessions.live(parsed.data.sid);
    if (session === null || session.personId !== parsed.data.sub) return null;
    const person = await deps.people.byId(session.personId);
    if (person === null || !person.active) return null;
    return {
      personId: person.id,
      name: person.name,
      email: person.email,
      role: person.role,
      firmId: person.firm?.id ?? null,
      sessionId: session.id,
      permissions: permissionsOf(person.role),
    };
  };
  const authenticators = new passport.Passport();
  authenticators.use(strategy);
  return async (req, res) => {
    const actor = await new Promise<Actor | null>((resolve, reject) => {
      const check = authenticators.authenticate('jwt', { session: false }, (error: unknown, found: Actor | false | null) => {
        if (error) reject(error instanceof Error ? error : new Error('authentication failed'));
        else resolve(found ? found : null);
      }) as (req: Request, res: Response, next: (error?: unknown) => void) => void;
      check(req, res, (error) => reject(error instanceof Error ? error : new Error('authentication failed')));
    });
    if (actor !== null && bearerOf(req) === null) refuseCrossSite(req, deps.publicUrl);
    return actor;
  };
}
