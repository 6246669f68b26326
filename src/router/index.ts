/** All addresses. Each noun lists its own in routes/; every page is loaded when it is first opened. */
import { createRouter, createWebHistory } from 'vue-router';
import type { RouteLocationNormalized, Router, RouteRecordRaw } from 'vue-router';
import { SECTIONS } from '../components/frame/sections.ts';
import { useNotices } from '../stores/notices.ts';
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

/** Not more often than this, or a page that is really gone would load for ever. */
const RELOAD_EVERY_MS = 20_000;
const RELOADED_AT = 'inkmuster.reloaded-at';

/** A page whose script is gone: the server has been updated since this tab was opened. Loading it whole brings the new one. */
function reloadAfterUpdate(error: Error, to: RouteLocationNormalized): void {
  if (!/dynamically imported module|preload|importing a module/i.test(error.message)) return;
  if (Date.now() - Number(sessionStorage.getItem(RELOADED_AT) ?? 0) < RELOAD_EVERY_MS) {
    useNotices().show({ kind: 'failed', text: 'This page could not be loaded. Check the connection and try again.' });
    return;
  }
  sessionStorage.setItem(RELOADED_AT, String(Date.now()));
  window.location.assign(to.fullPath);
}

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
  router.onError(reloadAfterUpdate);
  return router;
}
