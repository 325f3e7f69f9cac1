import * as z from 'zod';
import { PERMISSIONS, ROLES } from '../domain/vocabulary';
import { email, id } from './common';
import { route } from './route';

const tag = 'Session';

export const session = z.object({
  person: z.object({
    id,
    name: z.string(),
    email: z.string(),
    role: z.enum(ROLES),
    firm: z.object({ id, name: z.string() }).nullable(),
  }),
  permissions: z.array(z.enum(PERMISSIONS)),
});
export type Session = z.infer<typeof session>;

const credentials = z.object({ email, password: z.string().min(1, 'must not be empty').max(256) });

/** Tokens for API clients; browsers get the same in httpOnly cookies and never see them. */
export const tokens = z.object({
  accessToken: z.string(),
  accessExpiresInSeconds: z.number().int(),
  refreshToken: z.string(),
});

export const signIn = route({
  method: 'post', path: '/session', access: 'public', tag, summary: 'Sign in from a browser: sets the session cookies',
  body: credentials, reply: session,
});
export const readSession = route({
  method: 'get', path: '/session', access: 'signed in', tag, summary: 'Who is signed in, and what they may do', reply: session,
});
export const refreshSession = route({
  method: 'post', path: '/session/refresh', access: 'public', tag, summary: 'Renew the session by its refresh cookie', reply: session,
});
export const signOut = route({
  method: 'delete', path: '/session', access: 'public', tag, summary: 'Sign out: ends the session and clears the cookies',
});
export const issueTokens = route({
  method: 'post', path: '/tokens', access: 'public', tag, summary: 'Sign in as an API client: answers bearer tokens',
  body: credentials, reply: tokens, status: 201,
});
export const refreshTokens = route({
  method: 'post', path: '/tokens/refresh', access: 'public', tag, summary: 'Exchange a refresh token for new tokens, once',
  body: z.object({ refreshToken: z.string().min(1).max(512) }), reply: tokens,
});
export const revokeTokens = route({
  method: 'delete', path: '/tokens', access: 'signed in', tag, summary: 'End the session that this bearer token belongs to',
});
export const changePassword = route({
  method: 'put', path: '/session/password', access: 'signed in', tag, summary: 'Change the own password; ends every other session',
  body: z.object({
    current: z.string().min(1).max(256),
    next: z.string().min(12, 'must have at least 12 characters').max(256),
  }),
});
export const demoAccounts = route({
  method: 'get', path: '/demo/accounts', access: 'public', tag, summary: 'The demo accounts, in demo mode only',
  reply: z.array(z.object({ name: z.string(), email: z.string(), role: z.enum(ROLES), password: z.string() })),
});
