import { provideHttpClient, withInterceptors } from '@angular/common/http';
import { ErrorHandler, provideBrowserGlobalErrorListeners, type ApplicationConfig } from '@angular/core';
import {
  MAT_FORM_FIELD_DEFAULT_OPTIONS,
  type MatFormFieldDefaultOptions,
} from '@angular/material/form-field';
import {
  provideRouter,
  TitleStrategy,
  withComponentInputBinding,
  withInMemoryScrolling,
  withRouterConfig,
} from '@angular/router';
import { DeskErrorHandler } from './core/error-handler';
import { expiredSignIn, ownRequest, problems } from './core/interceptors';
import { DeskTitle } from './core/title';
import { routes } from './routes';

// Dense fields keep their labels only when outlined.
const fields: MatFormFieldDefaultOptions = {
  appearance: 'outline',
  subscriptSizing: 'dynamic',
  hideRequiredMarker: true,
};

export const appConfig: ApplicationConfig = {
  providers: [
    provideBrowserGlobalErrorListeners(),
    { provide: ErrorHandler, useClass: DeskErrorHandler },
    { provide: TitleStrategy, useExisting: DeskTitle },
    { provide: MAT_FORM_FIELD_DEFAULT_OPTIONS, useValue: fields },
    // Not by fetch: it does not tell how far an upload is.
    provideHttpClient(withInterceptors([problems, expiredSignIn, ownRequest])),
    provideRouter(
      routes,
      withComponentInputBinding(),
      withInMemoryScrolling({ scrollPositionRestoration: 'enabled', anchorScrolling: 'enabled' }),
      withRouterConfig({ onSameUrlNavigation: 'reload', paramsInheritanceStrategy: 'always' }),
    ),
  ],
};
