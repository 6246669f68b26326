/**
 * A point well inside an outline: one that names a piece of ink and goes on naming it when the picture is read a little differently.
 *
 * Input: an outline, filled even-odd, any unit. Output: the middle of the widest run of ink on a few level lines through its box;
 * for a figure without area, its first point. Not the centroid, which for a C or a frame lies outside. Nothing is mutated; O(points · lines).
 * The lines stand at odd places so that one never runs along a level edge of common shapes. Throws on an outline without points.
 */
import { outlineBox } from './ring.ts';
import type { Outline, Point } from './types.ts';

/** Shares of the height, from the middle outwards: of equally wide runs the one nearest the middle wins. */
const LINES = [0.4973, 0.3719, 0.6227, 0.2491, 0.7509, 0.1237, 0.8763];

export function insidePoint(outline: Outline): Point {
  const box = outlineBox(outline);
  let best: Point | null = null, bestWidth = 0;
  for (const share of LINES) {
    const y = box.y + share * box.h;
    const xs = crossings(outline, y);
    for (let i = 0; i + 1 < xs.length; i += 2) {
      const width = xs[i + 1] - xs[i];
      if (width > bestWidth) {
        bestWidth = width;
        best = { x: (xs[i] + xs[i + 1]) / 2, y };
      }
    }
  }
  return best ?? outline.rings.find((ring) => ring.length > 0)![0];
}

/** Where a level line meets the outline, from left to right. Half-open edges, so a corner counts once. */
function crossings(outline: Outline, y: number): number[] {
  const xs: number[] = [];
  for (const ring of outline.rings) {
    for (let i = 0, j = ring.length - 1; i < ring.length; j = i++) {
      const a = ring[j], b = ring[i];
      if (a.y > y !== b.y > y) xs.push(a.x + ((y - a.y) * (b.x - a.x)) / (b.y - a.y));
    }
  }
  return xs.sort((p, q) => p - q);
}
