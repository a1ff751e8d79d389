import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: '', title: 'Marking', loadComponent: () => import('./piles/piles') },
  { path: ':pileId', title: 'Bench', loadComponent: () => import('./bench/bench') },
];
export default routes;
