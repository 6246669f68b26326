import { computed, nextTick, reactive, ref, shallowRef, toRaw } from 'vue';
import { ApiError, wordsOf } from '../api/api-error.ts';

interface EditFormOptions<V extends object, R> {
  /** Values to begin with. */
  initial: V;
  /** Sends what was typed; `version` is that of the row the form began with, 0 for a new one. */
  save: (values: V, version: number) => Promise<R>;
  version?: number;
  /** Checks before sending: path → words. Fields that hold what cannot be read (a LengthField's null) belong here too. */
  check?: (values: V) => Record<string, string>;
}

/** Plain data all the way down: a value that was put together from reactive ones still has proxies inside, which cannot be cloned or sent. */
function copy<T>(value: T): T {
  const raw = toRaw(value) as unknown;
  if (Array.isArray(raw)) return raw.map(copy) as T;
  if (raw !== null && typeof raw === 'object' && Object.getPrototypeOf(raw) === Object.prototype) return Object.fromEntries(Object.entries(raw).map(([key, part]) => [key, copy(part)])) as T;
  return raw as T;
}
const same = (a: unknown, b: unknown) => JSON.stringify(a) === JSON.stringify(b);

/** Goes to the first field that has words beside it, in the form that was sent, so that they are seen and read out. */
async function focusFirstWrong(): Promise<void> {
  const form = document.activeElement?.closest('form');
  await nextTick();
  form?.querySelector<HTMLElement>('[aria-invalid=true]')?.focus();
}

/**
 * A form over one thing. A failed save keeps what was typed; a stale edit overwrites nothing: `theirs` holds the row as it is now,
 * for StaleEdit.vue, whose two ways on are `takeTheirs(values)` and `keepMine(version)`.
 */
export function useEditForm<V extends object, R>({ initial, save, version = 0, check }: EditFormOptions<V, R>) {
  const values = reactive(copy(initial)) as V;
  const settled = shallowRef(copy(initial));
  const rowVersion = ref(version);
  const saving = ref(false);
  const problem = ref<string | null>(null);
  const errors = ref<Record<string, string>>({});
  const theirs = shallowRef<R | null>(null);

  /** Starts over from a row: after a save, or when another is opened. */
  function reset(next: V, nextVersion: number): void {
    settled.value = copy(next);
    Object.assign(values, copy(next));
    errors.value = {};
    problem.value = null;
    rowVersion.value = nextVersion;
    theirs.value = null;
  }

  async function submit(): Promise<R | null> {
    if (saving.value) return null;
    problem.value = null;
    errors.value = check?.(values) ?? {};
    if (Object.keys(errors.value).length > 0) {
      await focusFirstWrong();
      return null;
    }
    saving.value = true;
    try {
      const answer = await save(copy(values), rowVersion.value);
      settled.value = copy(values);
      return answer;
    } catch (error) {
      if (error instanceof ApiError && error.code === 'stale' && error.current) theirs.value = error.current as R;
      else {
        problem.value = wordsOf(error);
        if (error instanceof ApiError) errors.value = Object.fromEntries(error.errors.map(({ path, message }) => [path, message]));
        await focusFirstWrong();
      }
      return null;
    } finally {
      saving.value = false;
    }
  }

  return {
    values,
    saving,
    /** A sentence for the whole form. */
    problem,
    /** Words beside a field, by its path in the request's body. */
    errors,
    theirs,
    dirty: computed(() => !same(values, settled.value)),
    submit,
    reset,
    /** Drops what was typed for the other's values. */
    takeTheirs: reset,
    /** Keeps what was typed; the next save is one over the other's version, knowingly. */
    keepMine(nextVersion: number): void {
      rowVersion.value = nextVersion;
      theirs.value = null;
    },
  };
}
