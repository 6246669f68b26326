import { computed } from 'vue';
import { useRoute, useRouter } from 'vue-router';

interface ListQueryOptions<S extends string> {
  /** Fields of the list's contract to sort by, with the words to show. The first is the one without a choice. */
  sorts: readonly { value: S | `-${S}`; label: string }[];
  /** Further query fields of this list, such as `tag`. */
  filters?: readonly string[];
}

const text = (value: unknown): string => (typeof value === 'string' ? value : '');

/**
 * Search, order, page and bin of a list, held in the address bar, so that reload, back and a second tab show the same.
 * Hand `query.value` to the list's call and to the key of useStudioQuery.
 */
export function useListQuery<S extends string>({ sorts, filters = [] }: ListQueryOptions<S>) {
  const route = useRoute();
  const router = useRouter();

  const search = computed(() => text(route.query.search));
  const sort = computed(() => sorts.find((choice) => choice.value === route.query.sort)?.value ?? sorts[0].value);
  const bin = computed(() => route.query.bin === 'true');
  const filter = computed(() => Object.fromEntries(filters.map((name) => [name, text(route.query[name])]).filter(([, value]) => value !== '')) as Record<string, string>);
  const query = computed(() => ({
    ...filter.value,
    sort: sort.value,
    ...(search.value === '' ? {} : { search: search.value }),
    ...(route.query.cursor ? { cursor: text(route.query.cursor) } : {}),
    ...(bin.value ? { bin: true as const } : {}),
  }));

  /** A changed search or order begins with the first page; typing does not fill up the browser's history. */
  function change(part: Record<string, string | undefined>, how: 'push' | 'replace' = 'push'): void {
    const next: Record<string, string | undefined> = { ...(route.query as Record<string, string>), cursor: undefined, ...part };
    void router[how]({ query: Object.fromEntries(Object.entries(next).filter(([, value]) => value)) as Record<string, string> });
  }

  /** Cursors of the pages before, kept with the history entry: pages go forward only on the server. */
  const trail = (): string[] => (Array.isArray(history.state?.trail) ? (history.state.trail as string[]) : []);

  return {
    query, search, sort, bin, filter, sorts,
    /** Something narrows the list, so that "nothing" means "nothing found". */
    narrowed: computed(() => search.value !== '' || Object.keys(filter.value).length > 0),
    setSearch: (value: string) => change({ search: value.trim() || undefined }, 'replace'),
    setSort: (value: string) => change({ sort: value === sorts[0].value ? undefined : value }),
    setBin: (shown: boolean) => change({ bin: shown ? 'true' : undefined }),
    setFilter: (name: string, value: string | undefined) => change({ [name]: value }),
    clear: () => change({ search: undefined, ...Object.fromEntries(filters.map((name) => [name, undefined])) }),
    onFirstPage: computed(() => !route.query.cursor),
    next: (cursor: string) => void router.push({ query: { ...route.query, cursor }, state: { trail: [...trail(), text(route.query.cursor)] } }),
    previous: () => {
      const before = trail();
      void router.push({ query: { ...route.query, cursor: before.at(-1) || undefined }, state: { trail: before.slice(0, -1) } });
    },
  };
}
export type ListQuery = ReturnType<typeof useListQuery>;
