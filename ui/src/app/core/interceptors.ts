import { HttpErrorResponse, type HttpInterceptorFn } from '@angular/common/http';
import { inject } from '@angular/core';
import { catchError, from, switchMap, throwError } from 'rxjs';
import { problemOf } from './problem';
import { Renewal } from './renewal';
import { SIGN_IN } from './sign-in-context';

/** A header that no form of another site can send; the server wants it with every act by cookie. */
export const ownRequest: HttpInterceptorFn = (request, next) =>
  next(request.method === 'GET' ? request : request.clone({ setHeaders: { 'X-Leanyear-Request': '1' } }));

/** Renews an expired sign-in and repeats the request, so that nothing typed is lost. */
export const expiredSignIn: HttpInterceptorFn = (request, next) => {
  const handling = request.context.get(SIGN_IN);
  if (handling === 'none') return next(request);
  const renewal = inject(Renewal);
  const began = Date.now();
  return next(request).pipe(
    catchError((error: unknown) => {
      if (!(error instanceof HttpErrorResponse) || error.status !== 401) return throwError(() => error);
      return from(renewal.renew(began, handling === 'ask')).pipe(
        switchMap((renewed) => (renewed ? next(request) : throwError(() => error))),
      );
    }),
  );
};

/** Turns every failure into a ProblemError, at the outermost place. */
export const problems: HttpInterceptorFn = (request, next) =>
  next(request).pipe(
    catchError((error: unknown) =>
      throwError(() => (error instanceof HttpErrorResponse ? problemOf(error) : error)),
    ),
  );
