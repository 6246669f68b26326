/**
 * Which part of a picture is seen: zoom and pan as a view box in picture px. Pure. The view box always has the proportions
 * of the window it is seen through, so that a screen pixel is the same length both ways.
 */
import type { Box, Point } from '../../server/engine/geometry/types.ts';

export interface Size { width: number; height: number }

/** Air round the whole picture, as a share of the longer side. */
const AIR = 0.02;
/** Screen pixels a picture pixel grows to at most: then one sees the grain, and more shows nothing new. */
const MAX_ZOOM = 24;
/** The picture may leave the window's middle, never the window. */
const KEEP_SHARE = 0.15;

export function wholePicture(picture: Size, pane: Size): Box {
  return around({ x: 0, y: 0, w: picture.width, h: picture.height }, pane, AIR);
}

/** The least view box of the pane's proportions that shows the given box with some air. */
export function around(box: Box, pane: Size, air: number): Box {
  const margin = air * Math.max(box.w, box.h);
  const w0 = box.w + 2 * margin, h0 = box.h + 2 * margin;
  const pxPerScreen = Math.max(w0 / pane.width, h0 / pane.height);
  const w = pane.width * pxPerScreen, h = pane.height * pxPerScreen;
  return { x: box.x + box.w / 2 - w / 2, y: box.y + box.h / 2 - h / 2, w, h };
}

/** Picture px for each screen px. */
export const pxPerScreen = (view: Box, pane: Size): number => view.w / pane.width;

export function zoomed(view: Box, factor: number, about: Point, picture: Size, pane: Size): Box {
  const whole = wholePicture(picture, pane);
  const w = Math.min(whole.w * 1.5, Math.max(pane.width / MAX_ZOOM, view.w / factor));
  const k = w / view.w;
  return kept({ x: about.x - (about.x - view.x) * k, y: about.y - (about.y - view.y) * k, w, h: view.h * k }, picture);
}

export function panned(view: Box, dx: number, dy: number, picture: Size): Box {
  return kept({ ...view, x: view.x + dx, y: view.y + dy }, picture);
}

function kept(view: Box, picture: Size): Box {
  const clamp = (at: number, length: number, whole: number) => {
    const keep = KEEP_SHARE * Math.min(length, whole);
    return Math.min(whole - keep, Math.max(keep - length, at));
  };
  return { ...view, x: clamp(view.x, view.w, picture.width), y: clamp(view.y, view.h, picture.height) };
}

/** The same middle and zoom through a window of another size. */
export function resized(view: Box, from: Size, to: Size): Box {
  const scale = pxPerScreen(view, from);
  const w = to.width * scale, h = to.height * scale;
  return { x: view.x + view.w / 2 - w / 2, y: view.y + view.h / 2 - h / 2, w, h };
}

/** A place on the screen, from the pane's top left, in the picture. */
export function toPicture(screen: Point, view: Box, pane: Size): Point {
  const scale = pxPerScreen(view, pane);
  return { x: view.x + screen.x * scale, y: view.y + screen.y * scale };
}

export const isInView = (box: Box, view: Box): boolean =>
  box.x >= view.x && box.y >= view.y && box.x + box.w <= view.x + view.w && box.y + box.h <= view.y + view.h;
