/** Undo and redo of immutable states. Changes of one gesture (a slider on its way) count as one step. */
import { computed, shallowRef } from 'vue';

/** More steps than anyone goes back; keeps a long evening from filling the memory. */
const MAX_STEPS = 200;

export function createUndoHistory<T>(first: T) {
  const past = shallowRef<readonly T[]>([]);
  const now = shallowRef<T>(first);
  const future = shallowRef<readonly T[]>([]);
  let gesture: string | null = null;

  return {
    now,
    canUndo: computed(() => past.value.length > 0),
    canRedo: computed(() => future.value.length > 0),
    /** `ongoing` names a gesture: its changes after the first replace one another. */
    change(next: T, ongoing: string | null = null): void {
      if (ongoing === null || ongoing !== gesture) past.value = [...past.value, now.value].slice(-MAX_STEPS);
      gesture = ongoing;
      now.value = next;
      future.value = [];
    },
    endGesture(): void {
      gesture = null;
    },
    undo(): boolean {
      const before = past.value.at(-1);
      if (past.value.length === 0) return false;
      gesture = null;
      future.value = [now.value, ...future.value];
      past.value = past.value.slice(0, -1);
      now.value = before as T;
      return true;
    },
    redo(): boolean {
      if (future.value.length === 0) return false;
      gesture = null;
      past.value = [...past.value, now.value];
      [now.value] = future.value;
      future.value = future.value.slice(1);
      return true;
    },
    /** Another's state takes the place of all. */
    reset(state: T): void {
      past.value = [];
      future.value = [];
      now.value = state;
      gesture = null;
    },
  };
}

export type UndoHistory<T> = ReturnType<typeof createUndoHistory<T>>;
