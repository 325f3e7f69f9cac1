import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./submissions').then((m) => m.Submissions) }];
