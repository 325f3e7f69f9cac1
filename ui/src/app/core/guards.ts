import { inject } from '@angular/core';
import { RedirectCommand, Router, type CanActivateFn, type CanDeactivateFn } from '@angular/router';
import type { Permission } from '@leanyear/vocabulary';
import { SessionStore } from './session';

/** Lets in who is signed in; others sign in first and come back to where they wanted to go. */
export const signedIn: CanActivateFn = async (_route, state) => {
  const router = inject(Router);
  const session = await inject(SessionStore).load();
  if (session !== null) return true;
  return router.createUrlTree(['/sign-in'], { queryParams: state.url === '/' ? {} : { next: state.url } });
};

/** Lets in who may; others are told, at the address they asked for. The server checks again, and that is what counts. */
export function may(permission: Permission): CanActivateFn {
  return async (_route, state) => {
    const router = inject(Router);
    const sessions = inject(SessionStore);
    await sessions.load();
    return (
      sessions.may(permission) ||
      new RedirectCommand(router.createUrlTree(['/forbidden']), { browserUrl: state.url })
    );
  };
}

/** Where a person begins: brokers with the quotes to their firm, everyone else at the desk. */
export function homeOf(session: { readonly permissions: readonly Permission[] } | null): string {
  return session?.permissions.includes('desk.read') === false ? '/broker' : '/desk';
}

/** A page that may hold what has not been saved. */
export interface HoldsDraft {
  hasUnsaved(): boolean;
}

/** Asks before what was typed is left behind. */
export const unsavedAsked: CanDeactivateFn<HoldsDraft> = async (page) => {
  if (!page.hasUnsaved()) return true;
  const { askBeforeLeaving } = await import('../shared/confirm/leaving');
  return askBeforeLeaving();
};
