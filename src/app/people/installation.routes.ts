import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: 'accounts', title: 'Accounts', loadComponent: () => import('./accounts/accounts') },
  { path: 'outbox', title: 'Outbox', loadComponent: () => import('./outbox/outbox') },
];
export default routes;
