import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: '', title: 'Sets', loadComponent: () => import('./set-list/set-list') },
  { path: 'new', title: 'New set', loadComponent: () => import('./set-settings/set-settings') },
  { path: ':setId', title: 'Set', loadComponent: () => import('./set-page/set-page') },
  { path: ':setId/settings', title: 'Settings of a set', loadComponent: () => import('./set-settings/set-settings') },
];
export default routes;
