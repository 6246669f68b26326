/** The studio of the page at hand; the router sets it from the address. */
import { defineStore } from 'pinia';
import { computed, ref } from 'vue';
import type { Role } from '../api/studio.ts';
import { useSession } from './session.ts';

/** Which studio to open next time on this device; only a convenience. */
const LAST_STUDIO = 'inkmuster.last-studio';

export const useStudio = defineStore('studio', () => {
  const session = useSession();
  const id = ref<string | null>(null);
  const membership = computed(() => session.studios.find((studio) => studio.id === id.value) ?? null);

  return {
    id,
    name: computed(() => membership.value?.name ?? ''),
    /** Null in a studio that the person does not belong to. */
    role: computed<Role | null>(() => membership.value?.role ?? null),
    enter(studioId: string): void {
      id.value = studioId;
      if (membership.value) localStorage.setItem(LAST_STUDIO, studioId);
    },
    /** Where a person without an address in hand is led to. */
    lastOrFirst(): string | null {
      const last = localStorage.getItem(LAST_STUDIO);
      return (session.studios.find((studio) => studio.id === last) ?? session.studios[0])?.id ?? null;
    },
  };
});
