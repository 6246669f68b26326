/**
 * Convex hull of points in the plane: A. M. Andrew, "Another efficient algorithm for convex hulls in two dimensions",
 * Information Processing Letters 9 (1979), the monotone chain.
 *
 * Input: any points, in any order; not mutated. Output: the hull's corners, clockwise as seen on the page (y down), first the
 * leftmost (then topmost); points on an edge are left out. Cost O(n log n). One distinct point gives that point; collinear
 * points give the two ends.
 */
import type { Outline, Point, Ring } from './types.ts';

export function convexHull(points: readonly Point[]): Ring {
  const sorted = [...points].sort((a, b) => a.x - b.x || a.y - b.y);
  const distinct = sorted.filter((p, i) => i === 0 || p.x !== sorted[i - 1].x || p.y !== sorted[i - 1].y);
  if (distinct.length < 3) return distinct;
  const upper = chain(distinct);
  const lower = chain(distinct.reverse());
  upper.pop();
  lower.pop();
  return [...upper, ...lower];
}

export function outlineHull(outline: Outline): Ring {
  return convexHull(outline.rings.flat());
}

/** Keeps only turns to the right as seen on the page. */
function chain(points: readonly Point[]): Point[] {
  const kept: Point[] = [];
  for (const p of points) {
    while (kept.length > 1 && cross(kept[kept.length - 2], kept[kept.length - 1], p) <= 0) kept.pop();
    kept.push(p);
  }
  return kept;
}

function cross(o: Point, a: Point, b: Point): number {
  return (a.x - o.x) * (b.y - o.y) - (a.y - o.y) * (b.x - o.x);
}
