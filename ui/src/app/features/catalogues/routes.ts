import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./catalogues').then((m) => m.Catalogues) },
  { path: ':catalogueId', loadComponent: () => import('./catalogue').then((m) => m.CataloguePage) },
];
