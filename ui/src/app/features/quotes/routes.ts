import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./quotes').then((m) => m.Quotes) }];
