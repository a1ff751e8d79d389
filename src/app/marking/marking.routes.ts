import type { Routes } from '@angular/router';
import { whoIs } from '../core/guards';

const routes: Routes = [
  { path: '', title: 'Marking', loadComponent: () => import('./piles/piles') },
  {
    path: 'corrections/:correctionId',
    title: 'Correction',
    canActivate: [whoIs('lead')],
    loadComponent: () => import('./correction/correction-view'),
  },
  {
    path: ':pileId/correction',
    title: 'Correct a part',
    canActivate: [whoIs('lead')],
    loadComponent: () => import('./correction/propose-correction'),
  },
  { path: ':pileId', title: 'Bench', loadComponent: () => import('./bench/bench') },
];
export default routes;
