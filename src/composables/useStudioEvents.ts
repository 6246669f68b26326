import { onScopeDispose } from 'vue';
import type { StudioNews } from '../api/events.ts';
import { useStudioNews } from '../stores/studio-news.ts';

/** Listens to the studio's news while the component lives. Queries made by useStudioQuery renew themselves without it. */
export function useStudioEvents(news: StudioNews): void {
  onScopeDispose(useStudioNews().listen(news));
}
