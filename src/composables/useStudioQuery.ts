import { useQuery, useQueryCache } from '@pinia/colada';
import type { EntryKey, UseQueryReturn } from '@pinia/colada';
import { storeToRefs } from 'pinia';
import { toValue } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { ApiError } from '../api/api-error.ts';
import { useStudio } from '../stores/studio.ts';

interface StudioQueryOptions<T> {
  /** As the server names it in its `changed` news: `stamp-sets`, `members` … */
  noun: string;
  /** What else the answer depends on: an id, the list's search. */
  key?: MaybeRefOrGetter<EntryKey>;
  read: (studioId: string) => Promise<T>;
  enabled?: MaybeRefOrGetter<boolean>;
  /**
   * Shows the answer to the key before while that to the new one comes. Lists and searches (keys that begin with 'list' or 'search') do,
   * so that nothing jumps; a thing does not, or one batch would stand under the address of another.
   */
  keepShown?: boolean;
}
const KEPT: readonly unknown[] = ['list', 'search'];

/**
 * Data of the studio at hand. Asked for again when the server tells that the noun changed, whoever changed it.
 * `data`, `error`, `status` ('pending' | 'error' | 'success'), `isLoading`, `refetch` as Pinia Colada gives them.
 */
export function useStudioQuery<T>({ noun, key, read, enabled, keepShown }: StudioQueryOptions<T>): UseQueryReturn<T, ApiError> {
  const { id } = storeToRefs(useStudio());
  return useQuery<T, ApiError>({
    key: () => studioKey(id.value ?? '', noun, ...(toValue(key) ?? [])),
    query: () => read(id.value!),
    enabled: () => id.value !== null && (toValue(enabled) ?? true),
    placeholderData: (previous) => (keepShown ?? KEPT.includes(toValue(key)?.[0])) ? (previous as undefined) : undefined,
  });
}

export function studioKey(studioId: string, noun: string, ...rest: EntryKey): EntryKey {
  return ['studio', studioId, noun, ...rest];
}

/** Makes the pages that show a noun ask again; call it after an own change. */
export function useRefresh(): (...nouns: string[]) => Promise<void> {
  const cache = useQueryCache();
  const studio = useStudio();
  return async (...nouns) => {
    // A query that fails says so where it is shown; the change itself has been made.
    await Promise.allSettled(nouns.map((noun) => cache.invalidateQueries({ key: studioKey(studio.id ?? '', noun) })));
  };
}
