import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: '', title: 'Feedback', loadComponent: () => import('./feedback-list/feedback-list') },
  { path: ':setId', title: 'Feedback', loadComponent: () => import('./feedback/feedback') },
];
export default routes;
