import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: '', title: 'Mark queries', loadComponent: () => import('./queries/query-list') },
  { path: ':queryId', title: 'Mark query', loadComponent: () => import('./queries/query-page') },
];
export default routes;
