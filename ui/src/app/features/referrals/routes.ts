import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./referrals').then((m) => m.Referrals) }];
