import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./basis').then((m) => m.BasisPage) }];
