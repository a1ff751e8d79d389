import { provideHttpClient, withFetch, withInterceptors } from '@angular/common/http';
import { type ApplicationConfig, provideBrowserGlobalErrorListeners } from '@angular/core';
import { provideRouter, TitleStrategy, withComponentInputBinding, withInMemoryScrolling } from '@angular/router';
import { routes } from './app.routes';
import { PageTitle } from './core/page-title';
import { problemDetailsInterceptor } from './core/problem-details-interceptor';
import { provideLook } from './ui/look';

/** What the application is made of: router, HTTP, titles. */
export const appConfig: ApplicationConfig = {
  providers: [
    provideBrowserGlobalErrorListeners(),
    provideRouter(
      routes,
      withComponentInputBinding(),
      withInMemoryScrolling({ scrollPositionRestoration: 'enabled', anchorScrolling: 'enabled' }),
    ),
    provideHttpClient(withFetch(), withInterceptors([problemDetailsInterceptor])),
    provideLook(),
    { provide: TitleStrategy, useExisting: PageTitle },
  ],
};
