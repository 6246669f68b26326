/** All addresses. Each noun lists its own in routes/; every page is loaded when it is first opened. */
import { createRouter, createWebHistory } from 'vue-router';
import type { Router, RouteRecordRaw } from 'vue-router';
import { SECTIONS } from '../components/frame/sections.ts';
import { useStudio } from '../stores/studio.ts';
import { guard } from './guard.ts';
import { personRoutes, plainRoutes } from './routes/account.ts';
import { batchRoutes } from './routes/batches.ts';
import { dieRoutes } from './routes/dies.ts';
import { gearRoutes } from './routes/gear.ts';
import { stampSetRoutes } from './routes/stamp-sets.ts';
import { studioRoutes } from './routes/studio.ts';

declare module 'vue-router' {
  interface RouteMeta {
    /** For people who are not signed in, too. */
    anyone?: true;
    /** Sign-in and the like: somebody signed in is led on. */
    signedOutOnly?: true;
    /** The page takes the window's whole width. */
    full?: true;
  }
}

const inStudio: RouteRecordRaw[] = [...batchRoutes, ...stampSetRoutes, ...dieRoutes, ...gearRoutes, ...studioRoutes];

export function createAppRouter(): Router {
  const router: Router = createRouter({
    history: createWebHistory(),
    scrollBehavior: (to, from, saved) => saved ?? (to.path === from.path ? false : { top: 0 }),
    routes: [
      ...plainRoutes,
      {
        path: '/',
        component: () => import('../components/frame/AppShell.vue'),
        children: [
          { path: '', name: 'home', redirect: () => {
            const studioId = useStudio().lastOrFirst();
            return studioId ? { name: 'studio', params: { studioId } } : { name: 'new-studio' };
          } },
          ...personRoutes,
          {
            path: 's/:studioId',
            children: [
              { path: '', name: 'studio', redirect: (to) => ({ name: SECTIONS.find(({ route }) => router.hasRoute(route))!.route, params: to.params }) },
              ...inStudio,
            ],
          },
          { path: ':anything(.*)*', name: 'not-found', component: () => import('../views/NotFoundView.vue') },
        ],
      },
    ],
  });
  router.beforeEach(guard);
  return router;
}
