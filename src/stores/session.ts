/** Who is signed in and which studios she belongs to. Server data of pages is not here but in queries beside the api. */
import { defineStore } from 'pinia';
import { computed, ref, shallowRef } from 'vue';
import { changeAccount, changePassword, readSession, register, signIn, signOut } from '../api/account.ts';
import type { PersonDetails, SessionInfo } from '../api/account.ts';
import { setCsrfToken } from '../api/http.ts';

export const useSession = defineStore('session', () => {
  const person = ref<PersonDetails | null>(null);
  const studios = ref<SessionInfo['studios']>([]);
  const known = ref(false);
  /** Why the server could not even be asked; the whole page then says so. */
  const unreachable = shallowRef<unknown>(null);

  function take(session: SessionInfo): void {
    person.value = session.person;
    studios.value = session.studios;
    known.value = true;
  }

  return {
    person,
    studios,
    /** False until the server has been asked once. */
    known,
    /** How lengths are shown; mm until somebody is signed in. */
    unit: computed(() => person.value?.unit ?? 'mm'),

    unreachable,

    async load(): Promise<void> {
      take(await readSession());
    },
    /** False where the server could not be asked. */
    async tryLoad(): Promise<boolean> {
      try {
        take(await readSession());
        unreachable.value = null;
        return true;
      } catch (error) {
        unreachable.value = error;
        return false;
      }
    },
    async signIn(email: string, password: string): Promise<void> {
      take(await signIn(email, password));
    },
    async register(account: Parameters<typeof register>[0]): Promise<void> {
      take(await register(account));
    },
    async signOut(): Promise<void> {
      await signOut();
      this.forget();
    },
    async change(change: Parameters<typeof changeAccount>[0]): Promise<void> {
      person.value = await changeAccount(change);
    },
    async changePassword(current: string, next: string): Promise<void> {
      take(await changePassword(current, next));
    },
    /** The server says that the session has ended, elsewhere or by time. */
    forget(): void {
      setCsrfToken(null);
      take({ person: null, studios: [], csrfToken: null });
    },
  };
});
