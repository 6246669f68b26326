/** What the frame says and asks on behalf of any page: read-out words, passing notices with an undo, and questions. */
import { defineStore } from 'pinia';
import { ref, shallowRef } from 'vue';

export interface Notice {
  id: number;
  text: string;
  kind: 'done' | 'failed';
  /** One thing that can still be done about it. */
  action?: { label: string; run: () => void | Promise<void> };
}

export interface Question {
  title: string;
  text: string;
  /** The word on the button that goes on: a verb, never "OK". */
  yes: string;
  no?: string;
  /** The button that goes on takes something away. */
  danger?: boolean;
}

/** Long enough to read a sentence and reach for Undo; with an action it waits for the reader. */
const NOTICE_MS = 6000;
const ACTION_MS = 20_000;

export const useNotices = defineStore('notices', () => {
  const spoken = ref('');
  const notices = ref<Notice[]>([]);
  /** The person has gone from one page to another, so that the next one's title may take the focus. */
  const moved = ref(false);
  const question = shallowRef<(Question & { answer: (yes: boolean) => void }) | null>(null);
  let lastId = 0;

  function dismiss(id: number): void {
    notices.value = notices.value.filter((notice) => notice.id !== id);
  }

  return {
    spoken,
    notices,
    moved,
    question,
    dismiss,
    /** Read out by screen readers, not shown. The same words twice are read twice. */
    announce(words: string): void {
      spoken.value = words === spoken.value ? `${words}\u00a0` : words;
    },
    show(notice: Omit<Notice, 'id'>): void {
      const id = ++lastId;
      notices.value = [...notices.value, { ...notice, id }];
      setTimeout(() => dismiss(id), notice.action ? ACTION_MS : NOTICE_MS);
    },
    /** True where the person goes on. */
    ask(asked: Question): Promise<boolean> {
      question.value?.answer(false);
      return new Promise((resolve) => {
        question.value = {
          ...asked,
          answer: (yes) => {
            question.value = null;
            resolve(yes);
          },
        };
      });
    },
  };
});
