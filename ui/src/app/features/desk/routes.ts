import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./desk').then((m) => m.Desk) }];
