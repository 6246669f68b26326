/**
 * Which box of one list is which of another: pairs them by their overlap, best first, each used once.
 *
 * Input: two lists of boxes in the same coordinates, any unit. Output: for each box of `now` the index of its partner in
 * `before`, or null. Overlap is intersection over union (Jaccard 1901), 1 for equal boxes; pairs below `least` are none.
 * Greedy, not the best sum: an unchanged box must keep its partner whatever happens around it. Equal overlaps go to the
 * lower indices, so the answer does not depend on chance. Nothing is mutated; O(n·m log nm); an empty box pairs with its equal only.
 */
import type { Box } from './types.ts';

export function matchBoxes(before: readonly Box[], now: readonly Box[], least: number): (number | null)[] {
  const pairs: { b: number; n: number; overlap: number }[] = [];
  now.forEach((box, n) => before.forEach((other, b) => {
    const overlap = boxOverlap(other, box);
    if (overlap >= least && overlap > 0) pairs.push({ b, n, overlap });
  }));
  pairs.sort((p, q) => q.overlap - p.overlap || p.n - q.n || p.b - q.b);

  const partner: (number | null)[] = now.map(() => null);
  const taken = new Set<number>();
  for (const { b, n } of pairs) {
    if (partner[n] !== null || taken.has(b)) continue;
    partner[n] = b;
    taken.add(b);
  }
  return partner;
}

/** Intersection over union, 0 to 1. */
export function boxOverlap(a: Box, b: Box): number {
  const w = Math.min(a.x + a.w, b.x + b.w) - Math.max(a.x, b.x);
  const h = Math.min(a.y + a.h, b.y + b.h) - Math.max(a.y, b.y);
  if (a.x === b.x && a.y === b.y && a.w === b.w && a.h === b.h) return 1;
  if (w <= 0 || h <= 0) return 0;
  const both = w * h;
  return both / (a.w * a.h + b.w * b.h - both);
}
