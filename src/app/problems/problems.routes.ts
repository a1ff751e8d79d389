import type { Routes } from '@angular/router';
import { whoIs } from '../core/guards';
import { keepBeforeLeaving } from './composer/keep-before-leaving';

const routes: Routes = [
  {
    path: '',
    pathMatch: 'full',
    title: 'Problems',
    canActivate: [whoIs('lead')],
    loadComponent: () => import('./problem-list/problem-list'),
  },
  {
    path: 'key-language',
    title: 'The key language',
    loadComponent: () => import('./key-language/key-language'),
  },
  {
    path: ':problemId/try-out',
    title: 'Try-out',
    canDeactivate: [keepBeforeLeaving],
    loadComponent: () => import('./try-out/try-out'),
  },
  {
    path: ':problemId',
    title: 'Problem',
    canDeactivate: [keepBeforeLeaving],
    loadComponent: () => import('./composer/composer'),
  },
];
export default routes;
