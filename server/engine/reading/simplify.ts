/**
 * Fewer points on a ring, none of the left-out ones farther than a tolerance from what is left (D. Douglas, T. Peucker, 1973).
 *
 * The leftmost, topmost, rightmost and bottommost points always stay, so that the box does not change. Not mutated; unit as given.
 * Cost: O(n log n) usually. A ring that would lose its area keeps its four extreme points.
 */
import type { Point, Ring } from '../geometry/types.ts';

export function simplifyRing(ring: Ring, tolerance: number): Ring {
  const n = ring.length;
  if (n <= 4) return ring;
  const keep = new Uint8Array(n);
  const anchors = extremes(ring);
  for (const a of anchors) keep[a] = 1;
  anchors.forEach((from, i) => {
    const to = anchors[(i + 1) % anchors.length];
    thin(ring, from, to > from ? to : to + n, tolerance * tolerance, keep);
  });
  return ring.filter((_, i) => keep[i] === 1);
}

/** Indices in ascending order, each once. */
function extremes(ring: Ring): number[] {
  let left = 0, top = 0, right = 0, bottom = 0;
  for (let i = 1; i < ring.length; i++) {
    if (ring[i].x < ring[left].x) left = i;
    if (ring[i].x > ring[right].x) right = i;
    if (ring[i].y < ring[top].y) top = i;
    if (ring[i].y > ring[bottom].y) bottom = i;
  }
  return [...new Set([left, top, right, bottom])].sort((a, b) => a - b);
}

/** Indices run on past the ring's end; a stack instead of recursion, since outlines can have thousands of points. */
function thin(ring: Ring, from: number, to: number, toleranceSq: number, keep: Uint8Array): void {
  const n = ring.length, stack: [number, number][] = [[from, to]];
  for (let span = stack.pop(); span; span = stack.pop()) {
    const [first, last] = span;
    let farthest = -1, worst = toleranceSq;
    for (let i = first + 1; i < last; i++) {
      const d = segmentDistanceSq(ring[i % n], ring[first % n], ring[last % n]);
      if (d > worst) { worst = d; farthest = i; }
    }
    if (farthest < 0) continue;
    keep[farthest % n] = 1;
    stack.push([first, farthest], [farthest, last]);
  }
}

export function segmentDistanceSq(p: Point, a: Point, b: Point): number {
  const dx = b.x - a.x, dy = b.y - a.y, lengthSq = dx * dx + dy * dy;
  const t = lengthSq === 0 ? 0 : Math.min(1, Math.max(0, ((p.x - a.x) * dx + (p.y - a.y) * dy) / lengthSq));
  return (p.x - a.x - t * dx) ** 2 + (p.y - a.y - t * dy) ** 2;
}
