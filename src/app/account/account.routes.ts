import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: '', title: 'Your account', loadComponent: () => import('./your-account/your-account') },
];
export default routes;
