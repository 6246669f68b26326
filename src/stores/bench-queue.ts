/**
 * What was recorded at the table and has not reached the server yet. It outlives a reload and a dropped connection: records wait in
 * local storage, are sent in their order, and are tried again until the server has taken or refused them.
 */
import { defineStore } from 'pinia';
import { computed, ref } from 'vue';
import { ApiError, wordsOf } from '../api/api-error.ts';
import { recordCutPass, recordImpression, recordPress, undoPress } from '../api/bench.ts';
import type { CutRecord, ImpressionRecord, OfPress, PressRecord } from '../api/bench.ts';

export type BenchRecord =
  | { kind: 'press'; body: PressRecord }
  | { kind: 'undo'; body: OfPress }
  | { kind: 'impression'; body: ImpressionRecord }
  | { kind: 'cut'; body: CutRecord };
export type Waiting = BenchRecord & { key: string; studioId: string; batchId: string };

const STORED = 'inkmuster.bench';
/** Between tries; the first is soon, since most gaps in a connection are short. */
const WAITS_MS = [1000, 2000, 5000, 10_000, 20_000];

function stored(): Waiting[] {
  try {
    return JSON.parse(localStorage.getItem(STORED) ?? '[]') as Waiting[];
  } catch {
    return [];
  }
}

export const useBenchQueue = defineStore('bench-queue', () => {
  const waiting = ref<Waiting[]>(stored());
  const refused = ref<string | null>(null);
  const trying = ref(false);
  let tries = 0;
  let timer: ReturnType<typeof setTimeout> | undefined;
  const listeners = new Set<() => void>();

  const keep = () => localStorage.setItem(STORED, JSON.stringify(waiting.value));

  function send({ studioId, batchId, key, ...record }: Waiting): Promise<unknown> {
    switch (record.kind) {
      case 'press': return recordPress(studioId, batchId, record.body, key);
      case 'undo': return undoPress(studioId, batchId, record.body);
      case 'impression': return recordImpression(studioId, batchId, record.body);
      case 'cut': return recordCutPass(studioId, batchId, record.body);
    }
  }

  async function flush(): Promise<void> {
    if (trying.value) return;
    trying.value = true;
    clearTimeout(timer);
    try {
      while (waiting.value.length > 0) {
        const [first] = waiting.value;
        try {
          await send(first);
        } catch (error) {
          // No connection, or a server that is away: later. A refusal is told and let go, or it would hold up all that follows.
          if (!(error instanceof ApiError) || error.status === 0 || error.status >= 500 || error.status === 429 || error.status === 401) {
            timer = setTimeout(() => void flush(), WAITS_MS[Math.min(tries++, WAITS_MS.length - 1)]);
            return;
          }
          if (!(first.kind === 'undo' && error.status === 404)) refused.value = wordsOf(error);
        }
        tries = 0;
        waiting.value = waiting.value.filter((row) => row.key !== first.key);
        keep();
      }
      listeners.forEach((tell) => tell());
    } finally {
      trying.value = false;
    }
  }

  function add(studioId: string, batchId: string, record: BenchRecord): void {
    waiting.value = [...waiting.value, { ...record, key: crypto.randomUUID(), studioId, batchId } as Waiting];
    keep();
    void flush();
  }
  window.addEventListener('online', () => void flush());
  if (waiting.value.length > 0) void flush();

  return {
    waiting, refused, count: computed(() => waiting.value.length), add, flush,
    /** Told when everything has arrived. */
    onSettled(tell: () => void): () => void {
      listeners.add(tell);
      return () => listeners.delete(tell);
    },
  };
});
