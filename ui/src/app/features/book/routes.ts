import type { Routes } from '@angular/router';

export const routes: Routes = [{ path: '', loadComponent: () => import('./book').then((m) => m.BookPage) }];
