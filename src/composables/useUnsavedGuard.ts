import { onScopeDispose, toValue } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import { onBeforeRouteLeave, onBeforeRouteUpdate } from 'vue-router';
import { useNotices } from '../stores/notices.ts';

/** Leaving a page with unsaved changes asks: within the application in our words, on reload or closing in the browser's. */
export function useUnsavedGuard(dirty: MaybeRefOrGetter<boolean>): void {
  const notices = useNotices();
  const mayLeave = () =>
    !toValue(dirty) || notices.ask({ title: 'Leave without saving?', text: 'What was changed on this page has not been saved.', yes: 'Leave without saving', no: 'Stay here', danger: true });
  onBeforeRouteLeave(mayLeave);
  onBeforeRouteUpdate((to, from) => to.path === from.path || mayLeave());

  const warn = (event: BeforeUnloadEvent) => {
    if (toValue(dirty)) event.preventDefault();
  };
  window.addEventListener('beforeunload', warn);
  onScopeDispose(() => window.removeEventListener('beforeunload', warn));
}
