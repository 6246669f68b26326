/**
 * News of a studio by server-sent events. The browser reconnects by itself after a break; where it gives up, we open anew.
 * A tab that nobody sees lets go of its connection: browsers allow six to a server without HTTP/2, and tabs left open would use them up.
 */
import type { Job } from '../../server/contract/jobs.ts';
import { addressOf } from './http.ts';

export interface StudioNews {
  /** Progress or end of queued work; without its result, which is asked for when it is done. */
  job?: (job: Omit<Job, 'result'>) => void;
  /** Rows changed: ask again for this noun (`stamp-sets`, `members` …). */
  changed?: (noun: string, id: string) => void;
  /** Connected again: news may have been missed meanwhile. */
  reconnected?: () => void;
}

const REOPEN_MS = 3000;
/** A glance at another tab is no absence. */
const UNSEEN_MS = 20_000;

/** Returns what ends it. */
export function listenToStudio(studioId: string, news: StudioNews): () => void {
  let source: EventSource | null = null;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let unseen: ReturnType<typeof setTimeout> | undefined;
  let openedBefore = false;

  const open = () => {
    source = new EventSource(addressOf('/events', {}, { studioId }));
    source.addEventListener('open', () => {
      if (openedBefore) news.reconnected?.();
      openedBefore = true;
    });
    source.addEventListener('job', (event) => news.job?.((JSON.parse((event as MessageEvent<string>).data) as { job: Job }).job));
    source.addEventListener('changed', (event) => {
      const { noun, id } = JSON.parse((event as MessageEvent<string>).data) as { noun: string; id: string };
      news.changed?.(noun, id);
    });
    source.addEventListener('error', () => {
      // Closed for good: the answer was an error (server starting, signed out). Without us the browser would not try again.
      if (source?.readyState === EventSource.CLOSED) timer = setTimeout(open, REOPEN_MS);
    });
  };
  const seen = () => {
    clearTimeout(unseen);
    if (document.visibilityState === 'hidden') unseen = setTimeout(letGo, UNSEEN_MS);
    else if (source === null) open();
  };
  const letGo = () => {
    clearTimeout(timer);
    source?.close();
    source = null;
  };
  open();
  document.addEventListener('visibilitychange', seen);
  return () => {
    document.removeEventListener('visibilitychange', seen);
    clearTimeout(unseen);
    letGo();
  };
}
