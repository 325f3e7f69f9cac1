import { InjectionToken } from '@angular/core';

/** The words are English, so figures and dates follow the reader's English; a decimal comma beside English words misleads. */
export const LOCALE = new InjectionToken<string>('locale of figures and dates', {
  providedIn: 'root',
  factory: () => navigator.languages.find((language) => language.toLowerCase().startsWith('en')) ?? 'en-GB',
});
