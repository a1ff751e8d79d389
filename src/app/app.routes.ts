import type { Routes } from '@angular/router';
import { whereToBegin, whoAdministers, whoIs, whoIsInTheCourse, whoIsSignedIn } from './core/guards';

/** Every address. Each feature loads when it is first needed. */
export const routes: Routes = [
  { path: 'sign-in', title: 'Sign in', loadComponent: () => import('./account/sign-in/sign-in') },
  {
    path: 'forgotten-password',
    title: 'Forgotten password',
    loadComponent: () => import('./account/forgotten-password/forgotten-password'),
  },
  { path: 'welcome', title: 'Set a password', loadComponent: () => import('./account/welcome/welcome') },
  {
    path: '',
    canActivate: [whoIsSignedIn],
    loadComponent: () => import('./core/shell/shell'),
    children: [
      {
        path: '',
        pathMatch: 'full',
        title: 'Begin',
        canActivate: [whereToBegin],
        loadComponent: () => import('./desk/no-course/no-course'),
      },
      { path: 'account', loadChildren: () => import('./account/account.routes') },
      {
        path: 'installation',
        canActivate: [whoAdministers],
        loadChildren: () => import('./people/installation.routes'),
      },
      { path: 'courses/new', title: 'New course', loadComponent: () => import('./people/new-course/new-course') },
      {
        path: 'courses/:courseId',
        canActivate: [whoIsInTheCourse],
        children: [
          { path: '', pathMatch: 'full', redirectTo: 'desk' },
          { path: 'desk', title: 'Desk', loadComponent: () => import('./desk/desk') },
          {
            path: 'problems',
            canActivate: [whoIs('lead', 'marker')],
            loadChildren: () => import('./problems/problems.routes'),
          },
          {
            path: 'sets/:setId/preview/:membershipId',
            title: 'Preview of a sheet',
            canActivate: [whoIs('lead')],
            loadComponent: () => import('./sheet/sheet-preview/sheet-preview'),
          },
          { path: 'sets', canActivate: [whoIs('lead')], loadChildren: () => import('./sets/sets.routes') },
          {
            path: 'marking',
            canActivate: [whoIs('lead', 'marker')],
            loadChildren: () => import('./marking/marking.routes'),
          },
          { path: 'results', canActivate: [whoIs('lead')], loadChildren: () => import('./results/results.routes') },
          {
            path: 'queries',
            canActivate: [whoIs('lead', 'marker')],
            loadChildren: () => import('./results/queries.routes'),
          },
          {
            path: 'receipts',
            title: 'Verify a receipt',
            canActivate: [whoIs('lead', 'marker')],
            loadComponent: () => import('./results/verify-receipt/verify-receipt'),
          },
          { path: 'people', canActivate: [whoIs('lead')], loadChildren: () => import('./people/people.routes') },
          { path: 'record', canActivate: [whoIs('lead')], loadChildren: () => import('./record/record.routes') },
          { path: 'sheets', canActivate: [whoIs('student')], loadChildren: () => import('./sheet/sheet.routes') },
          {
            path: 'feedback',
            canActivate: [whoIs('student')],
            loadChildren: () => import('./results/feedback.routes'),
          },
        ],
      },
    ],
  },
  { path: '**', title: 'Not found', loadComponent: () => import('./core/not-found/not-found') },
];
