import type { Routes } from '@angular/router';

const routes: Routes = [{ path: '', title: 'Record', loadComponent: () => import('./record') }];
export default routes;
