import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./post-room').then((m) => m.PostRoom) },
  { path: ':mailId', loadComponent: () => import('./mail').then((m) => m.MailPage) },
];
