import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: '', title: 'Sheets', loadComponent: () => import('./sheet-list/sheet-list') },
  { path: ':setId', title: 'Sheet', loadComponent: () => import('./sheet-view/sheet-view') },
  { path: ':setId/receipt', title: 'Receipt', loadComponent: () => import('./receipt/receipt') },
];
export default routes;
