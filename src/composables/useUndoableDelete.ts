import { wordsOf } from '../api/api-error.ts';
import { useNotices } from '../stores/notices.ts';
import { useRefresh } from './useStudioQuery.ts';

interface Removal {
  /** As it stands in a sentence: `Platform “Small”`. */
  what: string;
  remove: () => Promise<unknown>;
  restore: () => Promise<unknown>;
  /** Lists that show it. */
  nouns: string[];
  /** Leaves the thing's own page, before its lists ask anew. */
  leave?: () => Promise<unknown>;
}

/** Puts a thing in the bin and offers to take it out again at once. Asks nothing: a ConfirmButton has asked. True where it is gone. */
export function useUndoableDelete(): (removal: Removal) => Promise<boolean> {
  const notices = useNotices();
  const refresh = useRefresh();

  return async ({ what, remove, restore, nouns, leave }) => {
    try {
      await remove();
    } catch (error) {
      notices.show({ kind: 'failed', text: `${what} was not deleted. ${wordsOf(error)}` });
      return false;
    }
    await leave?.();
    await refresh(...nouns);
    const undo = async () => {
      try {
        await restore();
        await refresh(...nouns);
        notices.show({ kind: 'done', text: `${what} is back.` });
      } catch (error) {
        notices.show({ kind: 'failed', text: `${what} could not be brought back. It stays in the bin for 30 days. ${wordsOf(error)}` });
      }
    };
    notices.show({ kind: 'done', text: `${what} is in the bin, for 30 days.`, action: { label: 'Undo', run: undo } });
    return true;
  };
}
