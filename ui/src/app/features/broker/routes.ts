import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./broker').then((m) => m.Broker) },
  { path: ':quoteId', loadComponent: () => import('./broker-quote').then((m) => m.BrokerQuotePage) },
];
