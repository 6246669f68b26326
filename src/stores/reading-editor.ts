/**
 * The picture being put right: its reading under the person's wishes, undo and redo, and saving by itself. A save that fails
 * keeps what was done and can be tried again; one that meets another's change overwrites nothing.
 */
import { defineStore } from 'pinia';
import { computed, ref, shallowRef } from 'vue';
import { ApiError, wordsOf } from '../api/api-error.ts';
import { readReading, saveCorrections } from '../api/stamp-sets.ts';
import type { Picture, Sentiment } from '../api/stamp-sets.ts';
import { matchBoxes } from '../../server/engine/geometry/box-match.ts';
import type { Reading, ReadSentiment } from '../../server/engine/reading/types.ts';
import { sameWishes, scaledReading, wishedReading } from './reading-wishes.ts';
import type { Wishes } from './reading-wishes.ts';
import { createUndoHistory } from './undo-history.ts';

export type SaveState = 'saved' | 'waiting' | 'saving' | 'failed' | 'stale';
/** A sentiment as drawn: what is read, and the row it is saved as; none yet in the moment after a correction. */
export interface ShownSentiment { index: number; number: number; read: ReadSentiment; row: Sentiment | null; aside: boolean }

/** Long enough for the slider to come to rest, short enough that a reload loses nothing. */
const SAVE_AFTER_MS = 500;
/** As on the server: a sentiment goes with the row that stands where it does. */
const SAME_PLACE = 0.1;

const wishesOf = (picture: Picture): Wishes => ({ scale: picture.scale, groupingGap: picture.groupingGap, corrections: picture.corrections });

export const useReadingEditor = defineStore('reading-editor', () => {
  const studioId = ref('');
  const picture = shallowRef<Picture | null>(null);
  const rows = shallowRef<Sentiment[]>([]);
  const base = shallowRef<Reading | null>(null);
  const loadError = shallowRef<unknown>(null);
  const history = createUndoHistory<Wishes>({ scale: { kind: 'file' }, groupingGap: 'auto', corrections: { joins: [], splits: [], setAside: [] } });
  const saveState = ref<SaveState>('saved');
  const saveProblem = ref<string | null>(null);
  const theirs = shallowRef<Picture | null>(null);
  let timer: ReturnType<typeof setTimeout> | undefined;
  let under: Promise<void> | null = null;

  const wishes = history.now;
  const scale = computed(() => wishes.value.scale);
  const scaled = computed(() => {
    if (!base.value) return null;
    try {
      return scaledReading(base.value, scale.value);
    } catch {
      // A ruler on its way may have no length yet; what stood before is shown.
      return base.value;
    }
  });
  const result = computed(() => (scaled.value ? wishedReading(scaled.value, wishes.value) : null));
  const reading = computed(() => result.value?.reading ?? null);

  const shown = computed<ShownSentiment[]>(() => {
    if (!result.value) return [];
    const { reading: now, aside } = result.value;
    const read = [...now.sentiments, ...aside];
    const places = read.map(({ boxPx }) => ({ x: boxPx.x / now.widthPx, y: boxPx.y / now.heightPx, w: boxPx.w / now.widthPx, h: boxPx.h / now.heightPx }));
    const own = rows.value.filter((row) => row.place !== null);
    const partner = matchBoxes(own.map((row) => row.place!), places, SAME_PLACE);
    return read.map((sentiment, index) => ({ index, number: index + 1, read: sentiment, row: partner[index] === null ? null : own[partner[index]], aside: index >= now.sentiments.length }));
  });

  async function open(studio: string, next: Picture, sentiments: Sentiment[]): Promise<void> {
    if (picture.value?.id !== next.id) {
      await flush();
      picture.value = next;
      base.value = null;
      history.reset(wishesOf(next));
      settle();
    }
    studioId.value = studio;
    await renew(next, sentiments);
  }

  function settle(): void {
    saveState.value = 'saved';
    saveProblem.value = null;
    theirs.value = null;
  }

  /** News of the same picture: another's change, a new reading, or our own save come back. */
  async function renew(next: Picture, sentiments: Sentiment[]): Promise<void> {
    const before = picture.value;
    const mine = saveState.value !== 'saved';
    if (before && next.version < before.version) return;
    rows.value = sentiments;
    picture.value = mine && before ? { ...next, version: before.version } : next;
    if (!mine && !sameWishes(wishes.value, wishesOf(next))) history.reset(wishesOf(next));
    const readAnew = base.value === null || before?.jobId !== next.jobId || before?.state !== next.state || before?.mirrored !== next.mirrored;
    if (next.state !== 'read') base.value = null;
    else if (readAnew) await loadReading();
  }

  async function loadReading(): Promise<void> {
    const asked = picture.value!;
    loadError.value = null;
    try {
      const answer = await readReading(studioId.value, asked);
      if (picture.value?.id === asked.id) base.value = answer.reading;
    } catch (error) {
      if (picture.value?.id === asked.id) loadError.value = error;
    }
  }

  /** Changes the wishes and saves by itself. `gesture` names one that goes on, such as the slider's. */
  function change(next: Wishes, gesture: string | null = null): void {
    history.change(next, gesture);
    waitAndSave();
  }
  function waitAndSave(): void {
    if (saveState.value === 'stale') return;
    saveState.value = under ? 'saving' : 'waiting';
    clearTimeout(timer);
    timer = setTimeout(() => void save(), SAVE_AFTER_MS);
  }

  async function save(): Promise<void> {
    clearTimeout(timer);
    // One at a time: each carries the version that the one before it made.
    if (under) await under;
    if (saveState.value !== 'waiting' && saveState.value !== 'failed' && saveState.value !== 'saving') return;
    under = send();
    await under;
    under = null;
  }

  async function send(): Promise<void> {
    const sent = wishes.value, about = picture.value;
    if (!about) return;
    saveState.value = 'saving';
    try {
      const answer = await saveCorrections(studioId.value, about, { version: about.version, ...sent });
      if (picture.value?.id !== about.id) return;
      picture.value = answer.picture;
      rows.value = answer.sentiments;
      saveProblem.value = null;
      if (sameWishes(sent, wishes.value)) saveState.value = 'saved';
      else waitAndSave();
    } catch (error) {
      if (picture.value?.id !== about.id) return;
      saveProblem.value = wordsOf(error);
      const isStale = error instanceof ApiError && error.code === 'stale' && error.current;
      if (isStale) theirs.value = error.current as Picture;
      saveState.value = isStale ? 'stale' : 'failed';
    }
  }

  /** Before leaving: what still waits is sent. */
  async function flush(): Promise<void> {
    if (saveState.value === 'waiting' || saveState.value === 'saving') await save();
  }

  return {
    picture, base, reading, scaled, shown, wishes, loadError, saveState, saveProblem, theirs,
    canUndo: history.canUndo, canRedo: history.canRedo,
    asideParts: computed(() => result.value?.asideParts ?? []),
    open, change, save, flush, loadReading,
    endGesture: history.endGesture,
    undo: () => history.undo() && (waitAndSave(), true),
    redo: () => history.redo() && (waitAndSave(), true),
    /** A changed row, from its own form. */
    putRow(row: Sentiment): void {
      rows.value = rows.value.map((other) => (other.id === row.id ? row : other));
    },
    takeTheirs(): void {
      if (!theirs.value) return;
      picture.value = theirs.value;
      history.reset(wishesOf(theirs.value));
      settle();
    },
    async keepMine(): Promise<void> {
      if (!theirs.value) return;
      picture.value = theirs.value;
      saveState.value = 'waiting';
      theirs.value = null;
      await save();
    },
  };
});
