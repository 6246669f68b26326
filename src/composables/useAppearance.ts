import { computed, readonly, ref } from 'vue';
import { dark, light } from '../theme/tokens.ts';

export type Appearance = 'system' | 'light' | 'dark';
const KEPT = 'inkmuster.appearance';

const kept = localStorage.getItem(KEPT);
/** One for the whole page, as the page has one appearance. */
const choice = ref<Appearance>(kept === 'light' || kept === 'dark' ? kept : 'system');
const systemDark = ref(false);

const isDark = computed(() => choice.value === 'dark' || (choice.value === 'system' && systemDark.value));
const tokens = computed(() => (isDark.value ? dark : light));

/** Follows the system and puts the choice on the page's root; called once, before the first paint. */
export function startAppearance(): void {
  const media = window.matchMedia('(prefers-color-scheme: dark)');
  systemDark.value = media.matches;
  media.addEventListener('change', ({ matches }) => (systemDark.value = matches));
  mark();
}

function mark(): void {
  if (choice.value === 'system') delete document.documentElement.dataset.appearance;
  else document.documentElement.dataset.appearance = choice.value;
}

export function useAppearance() {
  return {
    choice: readonly(choice),
    isDark,
    /** For what cannot use CSS variables: Naive UI's theme, canvases. */
    tokens,
    choose(appearance: Appearance): void {
      choice.value = appearance;
      if (appearance === 'system') localStorage.removeItem(KEPT);
      else localStorage.setItem(KEPT, appearance);
      mark();
    },
  };
}
