import { inject, provide } from 'vue';
import type { ComputedRef, InjectionKey } from 'vue';
import { useQueryCache } from '@pinia/colada';
import type { Batch } from '../api/batches.ts';
import { ApiError } from '../api/api-error.ts';
import { wordsOf } from '../api/api-error.ts';
import { useNotices } from '../stores/notices.ts';
import { useStudio } from '../stores/studio.ts';
import { studioKey } from './useStudioQuery.ts';

const BATCH: InjectionKey<ComputedRef<Batch>> = Symbol('batch');

/** The batch page hands its batch to the steps, so that a step asks for nothing twice. */
export function provideBatch(batch: ComputedRef<Batch>): void {
  provide(BATCH, batch);
}

/**
 * The batch of the page, and the one way to change it: `change` takes a call that answers with the whole batch, shows that at once,
 * and says in words what went wrong. Somebody else's newer state is taken over and told.
 */
export function useBatch() {
  const batch = inject(BATCH)!;
  const cache = useQueryCache();
  const studio = useStudio();
  const notices = useNotices();

  function put(next: Batch): void {
    cache.setQueryData(studioKey(studio.id ?? '', 'batches', next.id), next);
  }

  async function change(work: (studioId: string, batch: Batch) => Promise<Batch>, words?: { done?: string; failed?: string }): Promise<boolean> {
    try {
      put(await work(studio.id!, batch.value));
      if (words?.done) notices.show({ kind: 'done', text: words.done });
      return true;
    } catch (error) {
      if (error instanceof ApiError && error.code === 'stale' && error.current) put(error.current as Batch);
      notices.show({ kind: 'failed', text: `${words?.failed ?? 'This was not saved.'} ${wordsOf(error)}` });
      return false;
    }
  }

  return { batch, put, change };
}
