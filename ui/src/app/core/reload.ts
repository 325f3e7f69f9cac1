import { InjectionToken } from '@angular/core';

/** Loads the page again from the server. */
export const RELOAD = new InjectionToken<() => void>('reload', {
  providedIn: 'root',
  factory: () => () => location.reload(),
});
