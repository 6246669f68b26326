/** One stream of news for the studio at hand, shared by everything on the page. The shell opens it; composables listen. */
import { defineStore } from 'pinia';
import { listenToStudio } from '../api/events.ts';
import type { StudioNews } from '../api/events.ts';

export const useStudioNews = defineStore('studio-news', () => {
  const listeners = new Set<StudioNews>();
  let end: (() => void) | null = null;

  return {
    listen(news: StudioNews): () => void {
      listeners.add(news);
      return () => listeners.delete(news);
    },
    open(studioId: string): void {
      end?.();
      end = listenToStudio(studioId, {
        job: (job) => listeners.forEach((news) => news.job?.(job)),
        changed: (noun, id) => listeners.forEach((news) => news.changed?.(noun, id)),
        reconnected: () => listeners.forEach((news) => news.reconnected?.()),
      });
    },
    close(): void {
      end?.();
      end = null;
    },
  };
});
