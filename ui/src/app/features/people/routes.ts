import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./people').then((m) => m.People) },
  { path: ':personId', loadComponent: () => import('./person').then((m) => m.PersonPage) },
];
