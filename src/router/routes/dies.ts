import type { RouteRecordRaw } from 'vue-router';

/** Paths are below `/s/:studioId/`. */
export const dieRoutes: RouteRecordRaw[] = [
  { path: 'dies', name: 'dies', component: () => import('../../views/DiesView.vue') },
  { path: 'dies/new', name: 'new-die-set', component: () => import('../../views/DieSetNewView.vue') },
  { path: 'dies/fit-table', name: 'fit-table', component: () => import('../../views/FitTableView.vue'), meta: { full: true } },
  { path: 'dies/:dieSetId', name: 'die-set', component: () => import('../../views/DieSetView.vue'), props: true },
];
