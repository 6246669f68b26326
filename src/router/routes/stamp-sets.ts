import type { RouteRecordRaw } from 'vue-router';

/** Paths are below `/s/:studioId/`. */
export const stampSetRoutes: RouteRecordRaw[] = [];
