import { inject } from '@angular/core';
import type { Routes } from '@angular/router';
import type { Permission } from '@leanyear/vocabulary';
import { homeOf, may, signedIn } from './core/guards';
import { SessionStore } from './core/session';

type Children = () => Promise<{ readonly routes: Routes }>;

/** Pages that show prices carry the cautions at their foot. */
const PRICES = { prices: true };

/** A feature of the desk: its folder says what is below it, this table who may come in. */
function feature(
  path: string,
  title: string,
  permission: Permission,
  children: Children,
  data = {},
): Routes[number] {
  return {
    path,
    title,
    data,
    canActivate: [may(permission)],
    loadChildren: () => children().then((module) => module.routes),
  };
}

export const routes: Routes = [
  {
    path: 'sign-in',
    title: 'Sign in',
    loadComponent: () => import('./features/sign-in/sign-in').then((m) => m.SignIn),
  },
  {
    path: 'q/:token',
    title: 'Quotation',
    loadChildren: () => import('./features/broker/link.routes').then((module) => module.routes),
  },
  {
    path: '',
    canActivate: [signedIn],
    loadComponent: () => import('./shell/shell').then((m) => m.Shell),
    children: [
      { path: '', pathMatch: 'full', redirectTo: () => homeOf(inject(SessionStore).session()) },
      feature('desk', 'Desk', 'desk.read', () => import('./features/desk/routes')),
      feature(
        'submissions',
        'Submissions',
        'submissions.read',
        () => import('./features/submissions/routes'),
        PRICES,
      ),
      feature('quotes', 'Quotes', 'quotes.read', () => import('./features/quotes/routes'), PRICES),
      feature(
        'referrals',
        'Referrals',
        'referrals.clear',
        () => import('./features/referrals/routes'),
        PRICES,
      ),
      feature(
        'catalogues',
        'Event catalogues',
        'catalogues.read',
        () => import('./features/catalogues/routes'),
      ),
      feature('basis', 'House basis', 'basis.read', () => import('./features/basis/routes')),
      feature('book', 'Book', 'book.read', () => import('./features/book/routes'), PRICES),
      feature('post-room', 'Post room', 'post-room.read', () => import('./features/post-room/routes')),
      feature('people', 'People', 'people.read', () => import('./features/people/routes')),
      feature('audit', 'Audit trail', 'audit.read', () => import('./features/audit/routes')),
      feature('broker', 'Quotations', 'broker.read', () => import('./features/broker/routes'), PRICES),
      {
        path: 'forbidden',
        title: 'Not for you',
        loadComponent: () => import('./features/not-found/forbidden').then((m) => m.Forbidden),
      },
      {
        path: '**',
        title: 'Not found',
        loadComponent: () => import('./features/not-found/not-found').then((m) => m.NotFound),
      },
    ],
  },
];
