import { wordsOf } from '../api/api-error.ts';
import { useNotices } from '../stores/notices.ts';

/**
 * Does one small change and says how it went: a notice for eyes, the live region for ears.
 * Answers undefined where it failed; for whole forms see useEditForm.
 */
export function useSaved() {
  const notices = useNotices();
  return async <T>(change: () => Promise<T>, words: { done: string; failed: string }): Promise<{ value: T } | undefined> => {
    try {
      const value = await change();
      notices.show({ kind: 'done', text: words.done });
      return { value };
    } catch (error) {
      notices.show({ kind: 'failed', text: `${words.failed} ${wordsOf(error)}` });
      return undefined;
    }
  };
}
