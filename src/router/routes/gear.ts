import type { RouteRecordRaw } from 'vue-router';

export const gearRoutes: RouteRecordRaw[] = [
  { path: 'gear', redirect: (to) => ({ name: 'platforms', params: to.params }) },
  { path: 'gear/platforms', name: 'platforms', component: () => import('../../views/GearPlatformsView.vue') },
  { path: 'gear/platforms/new', name: 'new-platform', component: () => import('../../views/GearPlatformView.vue') },
  { path: 'gear/platforms/:id', name: 'platform', component: () => import('../../views/GearPlatformView.vue'), props: true },
  { path: 'gear/printers', name: 'printers', component: () => import('../../views/GearPrintersView.vue') },
  { path: 'gear/printers/new', name: 'new-printer', component: () => import('../../views/GearPrinterView.vue') },
  { path: 'gear/printers/:id', name: 'printer', component: () => import('../../views/GearPrinterView.vue'), props: true },
  { path: 'gear/cardstocks', name: 'cardstocks', component: () => import('../../views/GearCardstocksView.vue') },
  { path: 'gear/cardstocks/new', name: 'new-cardstock', component: () => import('../../views/GearCardstockView.vue') },
  { path: 'gear/cardstocks/:id', name: 'cardstock', component: () => import('../../views/GearCardstockView.vue'), props: true },
  { path: 'gear/inks', name: 'inks', component: () => import('../../views/GearInksView.vue') },
  { path: 'gear/inks/new', name: 'new-ink', component: () => import('../../views/GearInkView.vue') },
  { path: 'gear/inks/:id', name: 'ink', component: () => import('../../views/GearInkView.vue'), props: true },
];
