/**
 * The part of a drawing that lies in a box: pages have no clipping of their own, and a tile must not run into its margins.
 *
 * Filled rings are clipped as polygons (I. E. Sutherland, G. W. Hodgman, "Reentrant polygon clipping", CACM 17 (1974)), each ring on its own, which
 * even-odd filling allows; stroked lines are cut where they leave the box (Y.-D. Liang, B. A. Barsky, "A new concept and method for line clipping", ACM TOG 3
 * (1984)), so that no line is drawn along the box. Words stay whole if their anchor is inside. Items that lie inside are returned as they are. O(points).
 */
import { clipToHalfPlane } from '../geometry/offset.ts';
import { ringBox } from '../geometry/ring.ts';
import type { Box, Point, Ring } from '../geometry/types.ts';
import type { PageItem, PagePath } from './types.ts';

/** Rounding of a drawing that just fits, mm. */
const SLACK_MM = 1e-6;

export function clipItems(items: readonly PageItem[], box: Box): PageItem[] {
  return items.flatMap((item): PageItem[] => {
    if (item.kind === 'text') return inBox(item.at, box) ? [item] : [];
    return clipPath(item, box);
  });
}

function clipPath(item: PagePath, box: Box): PagePath[] {
  const drawn = item.rings.filter((ring) => ring.length > 0);
  const within = drawn.map((ring) => relation(ring, box));
  if (within.every((r) => r === 'inside')) return [item];
  const { strokeMm, stroke, dashMm, fill, ...rest } = item;
  const parts: PagePath[] = [];
  if (fill !== undefined) {
    const rings = drawn.flatMap((ring, i) => (within[i] === 'inside' ? [ring] : within[i] === 'outside' ? [] : clipRing(ring, box)));
    if (rings.length > 0) parts.push({ ...rest, rings, fill, closed: true });
  }
  if (strokeMm === undefined) return parts;
  const look = { strokeMm, ...(stroke === undefined ? {} : { stroke }), ...(dashMm === undefined ? {} : { dashMm }) };
  const whole = drawn.filter((_, i) => within[i] === 'inside');
  if (whole.length > 0) parts.push({ ...rest, rings: whole, ...look });
  const cut = drawn.flatMap((ring, i) => (within[i] === 'crossing' ? clipLine(ring, item.closed, box) : []));
  if (cut.length > 0) parts.push({ ...rest, rings: cut, closed: false, ...look });
  return parts;
}

function inBox(p: Point, { x, y, w, h }: Box): boolean {
  return p.x >= x - SLACK_MM && p.x <= x + w + SLACK_MM && p.y >= y - SLACK_MM && p.y <= y + h + SLACK_MM;
}

function relation(ring: Ring, { x, y, w, h }: Box): 'inside' | 'outside' | 'crossing' {
  const own = ringBox(ring);
  if (own.x >= x - SLACK_MM && own.y >= y - SLACK_MM && own.x + own.w <= x + w + SLACK_MM && own.y + own.h <= y + h + SLACK_MM) return 'inside';
  return own.x > x + w || own.y > y + h || own.x + own.w < x || own.y + own.h < y ? 'outside' : 'crossing';
}

function clipRing(ring: Ring, { x, y, w, h }: Box): Ring[] {
  let left = clipToHalfPlane(ring, -1, 0, -x);
  left = clipToHalfPlane(left, 1, 0, x + w);
  left = clipToHalfPlane(left, 0, -1, -y);
  left = clipToHalfPlane(left, 0, 1, y + h);
  return left.length >= 3 ? [left] : [];
}

function clipLine(ring: Ring, closed: boolean, box: Box): Ring[] {
  const pieces: Ring[] = [];
  let piece: Ring = [];
  const count = closed ? ring.length : ring.length - 1;
  for (let i = 0; i < count; i++) {
    const a = ring[i], b = ring[(i + 1) % ring.length];
    const kept = clipSegment(a, b, box);
    if (kept === null) continue;
    const last = piece[piece.length - 1];
    if (last === undefined || last.x !== kept[0].x || last.y !== kept[0].y) {
      if (piece.length > 1) pieces.push(piece);
      piece = [kept[0]];
    }
    piece.push(kept[1]);
  }
  if (piece.length > 1) pieces.push(piece);
  return pieces;
}

function clipSegment(a: Point, b: Point, { x, y, w, h }: Box): [Point, Point] | null {
  const dx = b.x - a.x, dy = b.y - a.y;
  let from = 0, to = 1;
  for (const [p, q] of [[-dx, a.x - x], [dx, x + w - a.x], [-dy, a.y - y], [dy, y + h - a.y]]) {
    if (p === 0) {
      if (q < 0) return null;
      continue;
    }
    const t = q / p;
    if (p < 0) from = Math.max(from, t);
    else to = Math.min(to, t);
    if (from > to) return null;
  }
  const at = (t: number): Point => (t === 0 ? a : t === 1 ? b : { x: a.x + t * dx, y: a.y + t * dy });
  return [at(from), at(to)];
}
