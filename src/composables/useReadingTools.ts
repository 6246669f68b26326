/**
 * What the pointer and the keys do in the picture: pick, lasso, cut, move, lay a ruler, set the sheet's corners. Places are
 * picture px. Every drag has a way by single clicks: two clicks cut or lay the ruler, a click sets the chosen corner.
 */
import { computed, ref, shallowRef, watch } from 'vue';
import type { Point } from '../../server/engine/geometry/types.ts';
import type { useReadingEditor } from '../stores/reading-editor.ts';
import type { ShownSentiment } from '../stores/reading-editor.ts';
import { cutAlong, joinSentiments, setAside, takeBack } from '../stores/reading-wishes.ts';
import { inLasso, sentimentAt } from './reading-shapes.ts';

export type ReadingTool = 'select' | 'cut' | 'move' | 'ruler' | 'corners';
export type Corners = [Point, Point, Point, Point];
export interface Segment { from: Point; to: Point | null }
/** How the gesture was made: picture px that a finger's or mouse's inaccuracy is worth, and whether it adds to what is picked. */
export interface Gesture { reachPx: number; adds: boolean }

const distance = (a: Point, b: Point) => Math.hypot(a.x - b.x, a.y - b.y);

export function useReadingTools(editor: ReturnType<typeof useReadingEditor>, say: (words: string) => void) {
  const tool = ref<ReadingTool>('select');
  /** Parts of the picked sentiments: they outlive another grouping. */
  const picked = shallowRef<ReadonlySet<number>>(new Set());
  const hovered = ref<number | null>(null);
  const lasso = shallowRef<Point[]>([]);
  const cut = shallowRef<Segment | null>(null);
  const ruler = shallowRef<Segment | null>(null);
  const corners = shallowRef<Corners | null>(null);
  const corner = ref(0);
  /** Where the keys are, in tools that set points. */
  const crosshair = shallowRef<Point | null>(null);

  const isPicked = (sentiment: ShownSentiment) => sentiment.read.partIds.some((id) => picked.value.has(id));
  const pickedSentiments = computed(() => editor.shown.filter(isPicked));
  const kept = computed(() => pickedSentiments.value.filter(({ aside }) => !aside));

  // Undo, or another's version, may bring other points.
  watch(() => editor.wishes.scale, (scale) => {
    if (scale.kind === 'ruler') ruler.value = { from: scale.from, to: scale.to };
    if (scale.kind === 'sheet') corners.value = scale.cornersPx;
  }, { immediate: true });

  function choose(next: ReadingTool): void {
    cancel();
    tool.value = next;
    crosshair.value = null;
    if (next === 'corners') corners.value ??= proposedCorners();
  }

  /** Those that the reading found; else a sheet a tenth inside the picture. */
  function proposedCorners(): Corners | null {
    const base = editor.base;
    if (!base) return null;
    if (base.sheetPx?.length === 4) return base.sheetPx as Corners;
    const { widthPx: w, heightPx: h } = base;
    return [{ x: w * 0.1, y: h * 0.1 }, { x: w * 0.9, y: h * 0.1 }, { x: w * 0.9, y: h * 0.9 }, { x: w * 0.1, y: h * 0.9 }];
  }

  function pick(sentiments: readonly ShownSentiment[], adds = false): void {
    const next = new Set(adds ? picked.value : []);
    // Picked once more, one that is picked already is let go.
    const letGo = adds && sentiments.length === 1 && isPicked(sentiments[0]);
    const ids = sentiments.flatMap(({ read }) => read.partIds);
    ids.forEach((id) => (letGo ? next.delete(id) : next.add(id)));
    picked.value = next;
  }

  function tap(p: Point, gesture: Gesture): void {
    if (tool.value === 'select') {
      const index = sentimentAt(p, editor.shown.map(({ read }) => read), gesture.reachPx);
      pick(index === null ? [] : [editor.shown[index]], gesture.adds);
    } else if (tool.value === 'cut') {
      if (!cut.value) cut.value = { from: p, to: null };
      else finishCut(cut.value.from, p, gesture);
    } else if (tool.value === 'ruler') {
      ruler.value = ruler.value && ruler.value.to === null ? { from: ruler.value.from, to: p } : { from: p, to: null };
    } else if (tool.value === 'corners') {
      moveCorner(corner.value, p);
      corner.value = (corner.value + 1) % 4;
    }
  }

  let held: 'from' | 'to' | number | null = null;
  function drag(path: readonly Point[], gesture: Gesture): void {
    const start = path[0], now = path[path.length - 1];
    if (tool.value === 'select') lasso.value = [...path];
    else if (tool.value === 'cut') cut.value = { from: start, to: now };
    else if (tool.value === 'ruler') {
      const end = ruler.value;
      if (held === null) held = end?.to && distance(start, end.from) < 2 * gesture.reachPx ? 'from' : end?.to && distance(start, end.to) < 2 * gesture.reachPx ? 'to' : -1;
      ruler.value = held === 'from' && end ? { from: now, to: end.to } : held === 'to' && end ? { from: end.from, to: now } : { from: start, to: now };
    } else if (tool.value === 'corners' && corners.value) {
      if (held === null) held = corners.value.reduce((best, c, i, all) => (distance(start, c) < distance(start, all[best]) ? i : best), 0);
      corner.value = held as number;
      moveCorner(corner.value, now);
    }
  }

  function dragEnd(path: readonly Point[], gesture: Gesture): void {
    held = null;
    if (tool.value === 'select') {
      pick(inLasso(path, editor.shown.map(({ read }) => read)).map((i) => editor.shown[i]), gesture.adds);
      say(pickedWords(pickedSentiments.value.length));
      lasso.value = [];
    } else if (tool.value === 'cut') finishCut(path[0], path[path.length - 1], gesture);
  }

  function finishCut(from: Point, to: Point, gesture: Gesture): void {
    cut.value = null;
    if (distance(from, to) < gesture.reachPx) return;
    const before = editor.shown.length;
    editor.change(cutAlong(editor.wishes, from, to));
    const more = editor.shown.length - before;
    say(more > 0 ? `Cut: ${more} more.` : 'The line is kept, but it parts no sentiment.');
  }

  function moveCorner(index: number, p: Point): void {
    if (corners.value) corners.value = corners.value.map((c, i) => (i === index ? p : c)) as Corners;
  }

  /** Esc: what is being drawn goes, then what is picked. */
  function cancel(): void {
    held = null;
    if (lasso.value.length > 0) lasso.value = [];
    else if (cut.value) cut.value = null;
    else if (ruler.value && ruler.value.to === null) ruler.value = null;
    else if (tool.value === 'select') picked.value = new Set();
  }

  return {
    tool, picked, hovered, lasso, cut, ruler, corners, corner, crosshair, pickedSentiments, kept,
    isPicked, choose, pick, tap, drag, dragEnd, cancel, moveCorner,

    join(): void {
      if (kept.value.length < 2 || !editor.reading) return;
      const count = kept.value.length;
      editor.change(joinSentiments(editor.wishes, kept.value.map(({ read }) => read), editor.reading.parts));
      say(`${count} sentiments joined.`);
    },
    setAside(): void {
      if (kept.value.length === 0 || !editor.reading) return;
      const count = kept.value.length;
      editor.change(setAside(editor.wishes, kept.value.map(({ read }) => read), editor.reading.parts));
      picked.value = new Set();
      say(count === 1 ? 'Set aside.' : `${count} set aside.`);
    },
    takeBack(sentiment: ShownSentiment): void {
      editor.change(takeBack(editor.wishes, sentiment.read, editor.asideParts));
      say('Taken back.');
    },
    cutAlong: (from: Point, to: Point) => finishCut(from, to, { reachPx: 1, adds: false }),
    undo: () => say(editor.undo() ? 'Undone.' : 'There is nothing to undo.'),
    redo: () => say(editor.redo() ? 'Done again.' : 'There is nothing to redo.'),
  };
}
export type ReadingTools = ReturnType<typeof useReadingTools>;

export const pickedWords = (count: number): string => (count === 0 ? 'Nothing picked.' : count === 1 ? '1 sentiment picked.' : `${count} sentiments picked.`);
