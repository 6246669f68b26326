import type { RouteRecordRaw } from 'vue-router';

/** Paths are below `/s/:studioId/`. Every step of a batch is an address; the list of steps is components/batch/batch-steps.ts. */
export const batchRoutes: RouteRecordRaw[] = [
  { path: 'batches', name: 'batches', component: () => import('../../views/BatchesView.vue') },
  { path: 'batches/new', name: 'new-batch', component: () => import('../../views/BatchNewView.vue') },
  {
    path: 'batches/:batchId', component: () => import('../../views/BatchView.vue'), props: true, meta: { full: true },
    children: [
      { path: '', name: 'batch', redirect: (to) => ({ name: 'batch-choose', params: to.params }) },
      { path: 'choose', name: 'batch-choose', component: () => import('../../views/BatchChooseView.vue') },
      { path: 'fit', name: 'batch-fit', component: () => import('../../views/BatchFitView.vue') },
      { path: 'lay-out', name: 'batch-lay-out', component: () => import('../../views/BatchLayOutView.vue') },
      { path: 'print', name: 'batch-print', component: () => import('../../views/BatchPrintView.vue') },
      { path: 'bench', name: 'batch-bench', component: () => import('../../views/BatchBenchView.vue') },
    ],
  },
];
