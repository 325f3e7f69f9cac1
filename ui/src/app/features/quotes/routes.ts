import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./quotes').then((m) => m.Quotes) },
  { path: ':quoteId', loadComponent: () => import('./quote').then((m) => m.QuotePage) },
];
