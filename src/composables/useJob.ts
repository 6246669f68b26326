import { computed, onScopeDispose, shallowRef, toValue, watch } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import { ApiError, wordsOf } from '../api/api-error.ts';
import { cancelJob, readJob } from '../api/jobs.ts';
import type { Job } from '../api/jobs.ts';
import { useStudio } from '../stores/studio.ts';
import { useStudioEvents } from './useStudioEvents.ts';

const ENDED: readonly Job['state'][] = ['done', 'failed', 'cancelled'];
/** Should the news be held up on their way, the page still comes to know. */
const ASK_AGAIN_MS = 10_000;

/**
 * Follows queued work; give it a job's id, or null for none. Progress comes back after a reload, since it is asked for first.
 * `onDone` gets the job with its result, once.
 */
export function useJob(jobId: MaybeRefOrGetter<string | null | undefined>, onDone?: (job: Job) => void) {
  const studio = useStudio();
  const job = shallowRef<Job | null>(null);
  /** Why the job could not be asked for; the job's own failure is `job.error`. */
  const problem = shallowRef<string | null>(null);
  const ended = computed(() => job.value !== null && ENDED.includes(job.value.state));

  async function ask(): Promise<void> {
    const id = toValue(jobId);
    if (!id || !studio.id) return;
    try {
      const answer = await readJob(studio.id, id);
      if (toValue(jobId) !== id) return;
      const endedBefore = ended.value;
      job.value = answer;
      problem.value = null;
      if (answer.state === 'done' && !endedBefore) onDone?.(answer);
    } catch (error) {
      problem.value = wordsOf(error);
      // Forgotten by the server after a while: nothing more will come.
      if (error instanceof ApiError && error.status === 404) job.value = null;
    }
  }

  watch(() => toValue(jobId), () => {
    job.value = null;
    void ask();
  }, { immediate: true });

  useStudioEvents({
    job: (news) => {
      if (news.id !== toValue(jobId) || ended.value) return;
      // The news carry no result; an end is asked for.
      if (ENDED.includes(news.state)) void ask();
      else job.value = { ...news, result: null };
    },
    reconnected: () => void ask(),
  });
  const timer = setInterval(() => {
    if (toValue(jobId) && !ended.value) void ask();
  }, ASK_AGAIN_MS);
  onScopeDispose(() => clearInterval(timer));

  return {
    job,
    problem,
    running: computed(() => Boolean(toValue(jobId)) && !ended.value && problem.value === null),
    cancel: async () => {
      const id = toValue(jobId);
      if (id && studio.id) job.value = await cancelJob(studio.id, id);
    },
  };
}
