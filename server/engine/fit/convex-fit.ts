/**
 * Best place of an artwork in a convex area at a fixed turn: exact.
 *
 * All ink keeps the distance b from the edge with outward normal n and limit d when n·c ≤ d − h(n) − b, where c is the artwork's
 * centre and h(n) its support value, the farthest that its ink reaches along n. That is a linear programme in c and b
 * (border-programme.ts), and only the ink's hull matters. Support values come from turning calipers along both hulls at once
 * (M. I. Shamos 1978). Where the best places form a line, the one nearest to equal margins is taken.
 * Cost O(n + m) for n hull points and m edges, times some twenty steps of the programme. Nothing is mutated.
 */
import { clipToHalfPlane } from '../geometry/offset.ts';
import type { Point, Ring } from '../geometry/types.ts';
import { addConstraint, emptyConstraints, largestBorder, type BorderConstraints } from './border-programme.ts';
import type { HalfPlanes, TurnedArtwork } from './prepared.ts';

export interface Place { x: number; y: number; border: number }

/** A place this much worse is still equally good: rounding of sizes is a thousand times finer than any ruler. */
const EQUALLY_GOOD_MM = 1e-9;
/** Farther than any centre can lie from the area's. */
export const REACH_MM = 1e5;

export function convexFit(edges: HalfPlanes, artwork: TurnedArtwork, target: Point): Place {
  const constraints = placeConstraints(edges, artwork.hull);
  const best = largestBorder(constraints, target.x, target.y, REACH_MM);
  if (best === null) throw new Error('The border programme without limits on the place always has an answer.');
  return { ...centredPlace(constraints, best, target), border: best.border };
}

/** One constraint for each edge of the area: how far the artwork's centre may go along its normal. */
export function placeConstraints(edges: HalfPlanes, hull: Ring): BorderConstraints {
  const constraints = emptyConstraints(edges.count);
  const n = hull.length;
  let at = 0;
  const reach = (i: number, j: number): number => edges.nx[i] * hull[j].x + edges.ny[i] * hull[j].y;
  for (let j = 1; j < n; j++) if (reach(0, j) > reach(0, at)) at = j;
  for (let i = 0; i < edges.count; i++) {
    // Both hulls run clockwise, so the farthest point only ever moves on; n steps guard against rounding on flat hulls.
    let support = reach(i, at);
    for (let step = 0; step < n; step++) {
      const next = (at + 1) % n, further = reach(i, next);
      if (further < support) break;
      at = next;
      support = further;
    }
    addConstraint(constraints, edges.nx[i], edges.ny[i], 1, edges.limit[i] - support);
  }
  return constraints;
}

/** Border at a place: the slack of the tightest constraint. */
export function borderAtPlace(c: BorderConstraints, x: number, y: number): number {
  let border = Infinity;
  for (let i = 0; i < c.count * 4; i += 4) border = Math.min(border, c.rows[i + 3] - c.rows[i] * x - c.rows[i + 1] * y);
  return border;
}

function centredPlace(c: BorderConstraints, best: Place, target: Point): Point {
  const enough = best.border - EQUALLY_GOOD_MM;
  if (borderAtPlace(c, target.x, target.y) >= enough) return target;
  // The places that are good enough form a sliver: a point, or a line of no width.
  return nearestOnRing(placesWithBorder(c, enough, 0, 0, REACH_MM), target) ?? best;
}

/** The convex ring of all places with at least this border, within a square round (x, y); empty where there is none. */
export function placesWithBorder(c: BorderConstraints, border: number, x: number, y: number, reach: number): Ring {
  let ring: Ring = [{ x: x - reach, y: y - reach }, { x: x + reach, y: y - reach }, { x: x + reach, y: y + reach }, { x: x - reach, y: y + reach }];
  for (let i = 0; i < c.count * 4 && ring.length > 0; i += 4) ring = clipToHalfPlane(ring, c.rows[i], c.rows[i + 1], c.rows[i + 3] - c.rows[i + 2] * border);
  return ring;
}

/** Nearest point to p, which lies outside the ring; null of an empty ring. */
export function nearestOnRing(ring: Ring, p: Point): Point | null {
  let nearest: Point | null = null, leastSq = Infinity;
  ring.forEach((a, i) => {
    const b = ring[(i + 1) % ring.length];
    const dx = b.x - a.x, dy = b.y - a.y, lengthSq = dx * dx + dy * dy;
    const t = lengthSq === 0 ? 0 : Math.max(0, Math.min(1, ((p.x - a.x) * dx + (p.y - a.y) * dy) / lengthSq));
    const q = { x: a.x + t * dx, y: a.y + t * dy };
    const distSq = (q.x - p.x) ** 2 + (q.y - p.y) ** 2;
    if (distSq < leastSq) { leastSq = distSq; nearest = q; }
  });
  return nearest;
}
