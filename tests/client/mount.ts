/** Puts a component, or a composable within one, on a page of its own with stores, queries and addresses, as the application has them. */
import { PiniaColada } from '@pinia/colada';
import { createPinia, setActivePinia } from 'pinia';
import { createApp, defineComponent, h, nextTick } from 'vue';
import type { Component } from 'vue';
import { createMemoryHistory, createRouter, RouterView } from 'vue-router';
import type { Router } from 'vue-router';

export interface Mounted { root: HTMLElement; router: Router; unmount(): void }

export async function mountAt(component: Component, address = '/', props: Record<string, unknown> = {}): Promise<Mounted> {
  const pinia = createPinia();
  setActivePinia(pinia);
  const shown = defineComponent({ render: () => h(component, props) });
  const elsewhere = defineComponent({ render: () => h('p', 'elsewhere') });
  const router = createRouter({ history: createMemoryHistory(), routes: [{ path: '/elsewhere', component: elsewhere }, { path: '/:anything(.*)*', component: shown }] });
  await router.push(address);
  const root = document.body.appendChild(document.createElement('div'));
  const app = createApp({ render: () => h(RouterView) });
  app.use(pinia).use(PiniaColada).use(router).mount(root);
  await nextTick();
  return {
    root,
    router,
    unmount: () => {
      app.unmount();
      root.remove();
    },
  };
}

/** Runs a composable inside a mounted component and hands out what it returned. */
export async function inComponent<T>(composable: () => T, address = '/'): Promise<Mounted & { result: T }> {
  let result!: T;
  const mounted = await mountAt(defineComponent({ setup() { result = composable(); return () => h('p', 'here'); } }), address);
  return { ...mounted, result };
}

export const settle = async (): Promise<void> => {
  for (let i = 0; i < 5; i += 1) await new Promise((resolve) => setTimeout(resolve, 0));
  await nextTick();
};

export function type(input: HTMLInputElement, text: string): void {
  input.value = text;
  input.dispatchEvent(new Event('input', { bubbles: true }));
}
