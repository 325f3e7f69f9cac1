import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./broker').then((m) => m.BrokerHome) }];
