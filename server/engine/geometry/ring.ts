/**
 * Measures of one closed ring and of an outline: area, box, whether a point is inside.
 *
 * Rings are closed without repeating the first point; either winding is taken. An outline is filled even-odd, so holes need
 * no winding of their own. Nothing is mutated; each function is O(n). A ring of fewer than three points has no area and
 * contains nothing; the box of no points throws.
 */
import type { Box, Outline, Point, Ring } from './types.ts';

/** Twice-integrated shoelace, mm². Positive when the ring runs clockwise as seen on the page (y down). */
export function signedArea(ring: Ring): number {
  let twice = 0;
  for (let i = 0, j = ring.length - 1; i < ring.length; j = i++) twice += ring[j].x * ring[i].y - ring[i].x * ring[j].y;
  return twice / 2;
}

export function ringBox(ring: readonly Point[]): Box {
  return pointsBox([ring]);
}

export function outlineBox(outline: Outline): Box {
  return pointsBox(outline.rings);
}

function pointsBox(rings: readonly (readonly Point[])[]): Box {
  let left = Infinity, top = Infinity, right = -Infinity, bottom = -Infinity;
  for (const ring of rings) {
    for (const { x, y } of ring) {
      if (x < left) left = x;
      if (x > right) right = x;
      if (y < top) top = y;
      if (y > bottom) bottom = y;
    }
  }
  if (left > right) throw new RangeError('The box of no points is not defined.');
  return { x: left, y: top, w: right - left, h: bottom - top };
}

export function boxCentre(box: Box): Point {
  return { x: box.x + box.w / 2, y: box.y + box.h / 2 };
}

/** Even-odd over one ring; a point on the edge may go either way. */
export function ringContains(ring: Ring, p: Point): boolean {
  let inside = false;
  for (let i = 0, j = ring.length - 1; i < ring.length; j = i++) {
    const a = ring[i], b = ring[j];
    if (a.y > p.y !== b.y > p.y && p.x < ((b.x - a.x) * (p.y - a.y)) / (b.y - a.y) + a.x) inside = !inside;
  }
  return inside;
}

/** Even-odd over all rings of the outline. */
export function outlineContains(outline: Outline, p: Point): boolean {
  let inside = false;
  for (const ring of outline.rings) if (ringContains(ring, p)) inside = !inside;
  return inside;
}

/** Whether a ring lies inside another that it does not cross. The middles of three edges vote: corners may touch the other ring. */
export function ringInside(ring: Ring, other: Ring): boolean {
  const votes = [0, 1, 2].filter((k) => {
    const i = Math.floor((k * ring.length) / 3), a = ring[i], b = ring[(i + 1) % ring.length];
    return ringContains(other, { x: (a.x + b.x) / 2, y: (a.y + b.y) / 2 });
  });
  return votes.length >= 2;
}

/** Filled area, mm², of rings that do not cross: a ring inside an odd number of others is a hole. */
export function outlineArea(outline: Outline): number {
  let area = 0;
  outline.rings.forEach((ring, i) => {
    if (ring.length < 3) return;
    const depth = outline.rings.reduce((n, other, j) => n + (j !== i && ringInside(ring, other) ? 1 : 0), 0);
    area += (depth % 2 === 0 ? 1 : -1) * Math.abs(signedArea(ring));
  });
  return area;
}
