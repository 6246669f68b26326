import type { RouteRecordRaw } from 'vue-router';

/** Pages for anyone, outside the shell. */
export const plainRoutes: RouteRecordRaw[] = [
  { path: '/sign-in', name: 'sign-in', component: () => import('../../views/SignInView.vue'), meta: { anyone: true, signedOutOnly: true } },
  { path: '/register', name: 'register', component: () => import('../../views/RegisterView.vue'), meta: { anyone: true, signedOutOnly: true } },
  { path: '/invitations/:token', alias: '/invitation/:token', name: 'invitation', component: () => import('../../views/InvitationView.vue'), props: true, meta: { anyone: true } },
];

/** Pages of a person, inside the shell but in no studio. */
export const personRoutes: RouteRecordRaw[] = [
  { path: '/account', name: 'account', component: () => import('../../views/AccountView.vue') },
  { path: '/new-studio', name: 'new-studio', component: () => import('../../views/NewStudioView.vue') },
];
