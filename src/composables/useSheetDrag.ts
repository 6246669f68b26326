import { onScopeDispose, shallowRef } from 'vue';
import type { Placement, Setup } from '../../server/engine/gangrun/types.ts';
import type { Point } from '../../server/engine/geometry/types.ts';
import { useSheetEditor } from '../stores/sheet-editor.ts';
import { movedBy, snapped } from '../stores/sheet-layout.ts';
import type { SnapLines } from '../stores/sheet-layout.ts';

interface DragOptions { snap: () => boolean; gridMm: () => number }
/** How near a neighbour's middle pulls, mm. */
const REACH_MM = 1.2;

/** Dragging selected places: a step of undo for the whole of it, Esc takes it back, one change a frame however fast the pointer reports. */
export function useSheetDrag(bedPoint: (event: PointerEvent) => Point, { snap, gridMm }: DragOptions) {
  const editor = useSheetEditor();
  const lines = shallowRef<SnapLines>({ x: null, y: null });
  let drag: { from: Point; start: Pick<Setup, 'turns' | 'placements'>; ids: number[]; gesture: string; moved: boolean } | null = null;
  let frame = 0, last: PointerEvent | null = null, gestures = 0;

  function grab(placement: Placement, event: PointerEvent): void {
    if (event.button !== 0) return;
    const add = event.shiftKey || event.ctrlKey || event.metaKey;
    if (add) {
      const next = new Set(editor.selected);
      if (!next.delete(placement.id)) next.add(placement.id);
      editor.select(next);
      return;
    }
    if (!editor.selected.has(placement.id)) editor.select([placement.id]);
    const rest = [...editor.selected].filter((id) => id !== placement.id);
    drag = { from: bedPoint(event), start: editor.setup, ids: [placement.id, ...rest], gesture: `drag-${(gestures += 1)}`, moved: false };
    window.addEventListener('pointermove', onMove);
    window.addEventListener('pointerup', end);
    window.addEventListener('pointercancel', abort);
    window.addEventListener('keydown', onKey, true);
  }
  function onMove(event: PointerEvent): void {
    last = event;
    if (frame === 0) frame = requestAnimationFrame(step);
  }
  function step(): void {
    frame = 0;
    if (!drag || !last) return;
    const to = bedPoint(last);
    const [dx, dy] = [to.x - drag.from.x, to.y - drag.from.y];
    const by = snap() ? snapped(drag.start, drag.ids, dx, dy, { gridMm: gridMm(), reachMm: REACH_MM }) : { dx, dy, lines: { x: null, y: null } };
    lines.value = by.lines;
    if (!drag.moved && by.dx === 0 && by.dy === 0) return;
    drag.moved = true;
    editor.put(movedBy(drag.start, new Set(drag.ids), by.dx, by.dy), drag.gesture);
  }
  function end(): void {
    if (frame !== 0) {
      cancelAnimationFrame(frame);
      step();
    }
    stop();
  }
  function abort(): void {
    const moved = drag?.moved;
    stop();
    if (moved) editor.undo();
  }
  function onKey(event: KeyboardEvent): void {
    if (event.key !== 'Escape') return;
    event.preventDefault();
    event.stopPropagation();
    abort();
  }
  function stop(): void {
    cancelAnimationFrame(frame);
    frame = 0;
    drag = last = null;
    lines.value = { x: null, y: null };
    editor.endGesture();
    window.removeEventListener('pointermove', onMove);
    window.removeEventListener('pointerup', end);
    window.removeEventListener('pointercancel', abort);
    window.removeEventListener('keydown', onKey, true);
  }
  onScopeDispose(stop);
  return { grab, lines };
}
