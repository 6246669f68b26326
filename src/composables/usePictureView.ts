/** Zoom and pan of a picture in a pane that may change its size. Screen places are px from the pane's top left. */
import { computed, onScopeDispose, shallowRef, toValue, watch } from 'vue';
import type { MaybeRefOrGetter, Ref } from 'vue';
import type { Box, Point } from '../../server/engine/geometry/types.ts';
import { around, isInView, panned, pxPerScreen, resized, toPicture, wholePicture, zoomed } from './picture-view.ts';
import type { Size } from './picture-view.ts';

/** Air round a sentiment that is brought into view, as a share of its longer side. */
const CLOSE_UP_AIR = 0.6;

export function usePictureView(element: Readonly<Ref<HTMLElement | null>>, picture: MaybeRefOrGetter<Size>) {
  const pane = shallowRef<Size>({ width: 600, height: 450 });
  const view = shallowRef<Box>(wholePicture(toValue(picture), pane.value));
  let whole = true;

  const observer = new ResizeObserver(([entry]) => {
    const { width, height } = entry.contentRect;
    if (width < 1 || height < 1) return;
    const before = pane.value;
    pane.value = { width, height };
    view.value = whole ? wholePicture(toValue(picture), pane.value) : resized(view.value, before, pane.value);
  });
  watch(element, (now, before) => {
    if (before) observer.unobserve(before);
    if (now) observer.observe(now);
  }, { immediate: true });
  onScopeDispose(() => observer.disconnect());
  watch(() => `${toValue(picture).width} × ${toValue(picture).height}`, () => fit());

  function fit(): void {
    whole = true;
    view.value = wholePicture(toValue(picture), pane.value);
  }
  function zoom(factor: number, screen?: Point): void {
    whole = false;
    const about = screen ? toPicture(screen, view.value, pane.value) : { x: view.value.x + view.value.w / 2, y: view.value.y + view.value.h / 2 };
    view.value = zoomed(view.value, factor, about, toValue(picture), pane.value);
  }

  return {
    pane, view, fit, zoom,
    scale: computed(() => pxPerScreen(view.value, pane.value)),
    place: (screen: Point): Point => toPicture(screen, view.value, pane.value),
    /** By screen px. */
    pan(dx: number, dy: number): void {
      whole = false;
      const scale = pxPerScreen(view.value, pane.value);
      view.value = panned(view.value, dx * scale, dy * scale, toValue(picture));
    },
    /** Nothing happens where it can be seen already. */
    show(box: Box): void {
      if (isInView(box, view.value)) return;
      whole = false;
      view.value = around(box, pane.value, CLOSE_UP_AIR);
    },
  };
}
export type PictureView = ReturnType<typeof usePictureView>;
