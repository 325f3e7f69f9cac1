import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./link').then((m) => m.Link) }];
