import type { RouteRecordRaw } from 'vue-router';

/** Paths are below `/s/:studioId/`. */
export const stampSetRoutes: RouteRecordRaw[] = [
  { path: 'stamp-sets', name: 'stamp-sets', component: () => import('../../views/StampSetsView.vue') },
  { path: 'stamp-sets/new', name: 'new-stamp-set', component: () => import('../../views/StampSetNewView.vue') },
  { path: 'stamp-sets/:stampSetId', name: 'stamp-set', component: () => import('../../views/StampSetView.vue'), props: true, meta: { full: true } },
];
