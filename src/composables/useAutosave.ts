import { onScopeDispose, ref } from 'vue';

/** Long enough not to send every digit, short enough to be saved before one looks away. */
const WAIT_MS = 500;

/**
 * Saves small changes by itself: those made close together go as one, and one goes at a time, since each carries the version that
 * the one before it made. `send` answers whether it was saved; what was not is dropped, for `send` has told the person.
 */
export function useAutosave<E extends object>(send: (edit: E) => Promise<boolean>) {
  const waiting = ref(false);
  let pending: E | null = null;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let under: Promise<unknown> = Promise.resolve();

  async function flush(): Promise<void> {
    clearTimeout(timer);
    if (pending === null) return;
    const edit = pending;
    pending = null;
    under = under.then(() => send(edit));
    await under;
    if (pending === null) waiting.value = false;
  }

  // A page that is left sends what still waits; the answer finds its way into the query by itself.
  onScopeDispose(() => void flush());
  return {
    /** Something is on its way or waits to be. */
    waiting,
    flush,
    save(edit: E, soon = false): void {
      pending = { ...pending, ...edit } as E;
      waiting.value = true;
      clearTimeout(timer);
      if (soon) void flush();
      else timer = setTimeout(() => void flush(), WAIT_MS);
    },
  };
}
