import type { Routes } from '@angular/router';

const routes: Routes = [
  { path: '', title: 'People', loadComponent: () => import('./people') },
  { path: 'import', title: 'Add people from a file', loadComponent: () => import('./roster-import/roster-import') },
  { path: 'course', title: 'The course', loadComponent: () => import('./course-settings/course-settings') },
];
export default routes;
