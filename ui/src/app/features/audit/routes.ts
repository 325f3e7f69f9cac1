import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./audit').then((m) => m.Audit) }];
