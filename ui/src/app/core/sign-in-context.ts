import { HttpContextToken } from '@angular/common/http';

/**
 * What to do when a request finds the sign-in expired: `ask` renews it and, where that fails, asks for the password over
 * the page; `renew` does the first only; `none` is for the requests that sign in themselves.
 */
export const SIGN_IN = new HttpContextToken<'ask' | 'renew' | 'none'>(() => 'ask');
