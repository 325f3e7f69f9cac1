import type { Routes } from '@angular/router';
import { unsavedAsked } from '../../core/guards';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./submissions').then((m) => m.Submissions) },
  { path: 'new', title: 'New submission', loadComponent: () => import('./new-submission').then((m) => m.NewSubmission) },
  {
    path: ':submissionId',
    loadComponent: () => import('./submission').then((m) => m.Submission),
    children: [
      { path: '', pathMatch: 'full', redirectTo: 'losses' },
      { path: 'losses', loadComponent: () => import('./losses/losses').then((m) => m.Losses) },
      {
        path: 'programme',
        canDeactivate: [unsavedAsked],
        loadComponent: () => import('./programme/programme').then((m) => m.ProgrammePage),
      },
      { path: 'price', loadComponent: () => import('./price/price').then((m) => m.Price) },
      { path: 'quotes', loadComponent: () => import('./quotes/submission-quotes').then((m) => m.SubmissionQuotes) },
    ],
  },
];
