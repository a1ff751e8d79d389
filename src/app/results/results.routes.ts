import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: '', title: 'Results', loadComponent: () => import('./results-list/results-list') },
  { path: ':setId', title: 'Results of a set', loadComponent: () => import('./set-results/set-results') },
  { path: ':setId/release', title: 'Release', loadComponent: () => import('./release/release') },
];
export default routes;
