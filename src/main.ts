import { PiniaColada } from '@pinia/colada';
import { createPinia } from 'pinia';
import { createApp } from 'vue';
import App from './App.vue';
import { whenSignedOut } from './api/http.ts';
import { startAppearance } from './composables/useAppearance.ts';
import { createAppRouter } from './router/index.ts';
import { useSession } from './stores/session.ts';
import './theme/fonts.css';
import './theme/base.css';

startAppearance();
const pinia = createPinia();
const router = createAppRouter();

createApp(App)
  .use(pinia)
  // News of changes come by events, so data is not asked for again merely because a page is opened within some seconds.
  .use(PiniaColada, { queryOptions: { staleTime: 5_000, gcTime: 5 * 60_000 } })
  .use(router)
  .mount('#app');

whenSignedOut(() => {
  const session = useSession(pinia);
  if (!session.person) return;
  session.forget();
  void router.push({ name: 'sign-in', query: { to: router.currentRoute.value.fullPath, ended: 'true' } });
});
