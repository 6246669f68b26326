import type { RouteRecordRaw } from 'vue-router';

export const gearRoutes: RouteRecordRaw[] = [];
