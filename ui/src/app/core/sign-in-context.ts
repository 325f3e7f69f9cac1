import { HttpContextToken } from '@angular/common/http';

/**
 * What to do when a request finds the sign-in expired: `ask` renews it and, where that fails, asks for the password over
 * the page; `renew` does the first only; `none` is for the requests that sign in themselves.
 */
export const SIGN_IN = new HttpContextToken<'ask' | 'renew' | 'none'>(() => 'ask');

/** Under this name the browser keeps when any of its tabs last had the session renewed, in milliseconds. */
export const RENEWED_AT = 'leanyear.renewed-at';
