import { readFile } from 'node:fs/promises';
import type { z } from 'zod';
import {
  changePassword,
  demoAccounts,
  issueTokens,
  readSession,
  refreshSession,
  refreshTokens,
  revokeTokens,
  signIn,
  signOut,
} from '../../contract/session';
import { NotFound } from '../../domain/shared/errors';
import { refuseCrossSite } from '../../http/cross-site';
import { serve, type ApiRouter } from '../../http/serve';
import { clearSessionCookies, refreshCookieOf, setSessionCookies } from '../../http/session-cookies';
import { ACCESS_SECONDS } from '../../http/tokens';
import { passwordFits } from './passwords';
import { changePasswordOf, endSessionOf, refreshWith, signInWith, viewOf, type SessionDeps } from './use-cases';

export interface SessionRouteDeps extends SessionDeps {
  readonly publicUrl: string;
  /** File with the demo's accounts; null outside demo mode. */
  readonly demoAccountsFile: string | null;
}

export function registerSession(router: ApiRouter, deps: SessionRouteDeps): void {
  // The decoy is hashed now: made at the first unknown account, it would give that account away by its time.
  void passwordFits(null, '');

  serve(router, signIn, async ({ body, req, res }) => {
    refuseCrossSite(req, deps.publicUrl);
    const opened = await signInWith(deps, body, 'browser');
    setSessionCookies(res, opened);
    return opened.view;
  });

  serve(router, readSession, async ({ actor }) => {
    const person = await deps.people.byId(actor.personId);
    if (person === null) throw new NotFound('person');
    return viewOf(person);
  });

  serve(router, refreshSession, async ({ req, res }) => {
    refuseCrossSite(req, deps.publicUrl);
    try {
      const opened = await refreshWith(deps, refreshCookieOf(req));
      setSessionCookies(res, opened);
      return opened.view;
    } catch (error) {
      clearSessionCookies(res);
      throw error;
    }
  });

  serve(router, signOut, async ({ req, res }) => {
    refuseCrossSite(req, deps.publicUrl);
    clearSessionCookies(res);
    const actor = await router.authenticate(req, res);
    if (actor !== null) await deps.sessions.end(actor.sessionId);
    await endSessionOf(deps, refreshCookieOf(req));
    return undefined;
  });

  const asTokens = (opened: { access: string; refresh: string }) => ({
    accessToken: opened.access,
    accessExpiresInSeconds: ACCESS_SECONDS,
    refreshToken: opened.refresh,
  });
  serve(router, issueTokens, async ({ body }) => asTokens(await signInWith(deps, body, 'bearer')));
  serve(router, refreshTokens, async ({ body }) => asTokens(await refreshWith(deps, body.refreshToken)));
  serve(router, revokeTokens, async ({ actor }) => {
    await deps.sessions.end(actor.sessionId);
    return undefined;
  });

  serve(router, changePassword, async ({ actor, body }) => {
    await changePasswordOf(deps, actor, body.current, body.next);
    return undefined;
  });

  serve(router, demoAccounts, async () => {
    if (deps.demoAccountsFile === null || demoAccounts.reply === undefined) throw new NotFound('demo');
    const text = await readFile(deps.demoAccountsFile, 'utf8').catch(() => null);
    if (text === null) throw new NotFound('demo');
    return demoAccounts.reply.parse(JSON.parse(text) as z.input<typeof demoAccounts.reply>);
  });
}
