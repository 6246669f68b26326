import type { RouteRecordRaw } from 'vue-router';

export const studioRoutes: RouteRecordRaw[] = [
  { path: 'search', name: 'search', component: () => import('../../views/SearchView.vue') },
  { path: 'studio', redirect: (to) => ({ name: 'members', params: to.params }) },
  { path: 'studio/members', name: 'members', component: () => import('../../views/MembersView.vue') },
  { path: 'studio/settings', name: 'settings', component: () => import('../../views/SettingsView.vue') },
  { path: 'studio/bin', name: 'bin', component: () => import('../../views/BinView.vue') },
  { path: 'studio/activity', name: 'activity', component: () => import('../../views/ActivityView.vue') },
];
