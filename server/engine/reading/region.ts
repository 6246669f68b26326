/**
 * The part of a picture that is read: everything, or what lies within a convex polygon such as a sheet's four corners.
 *
 * Input: size in pixels and a polygon in continuous pixel places, or null for everything; not mutated. Output: line by line, the pixels
 * whose middles lie inside. Cost: edges times lines.
 */
import type { Point } from '../geometry/types.ts';

export interface Region {
  width: number;
  height: number;
  /** First pixel and first one past the last, for each line; equal where the line has none. */
  from: Int32Array;
  to: Int32Array;
}

export function regionWithin(width: number, height: number, polygon: readonly Point[] | null): Region {
  const from = new Int32Array(height), to = new Int32Array(height);
  for (let y = 0; y < height; y++) {
    if (!polygon) { to[y] = width; continue; }
    let left = Infinity, right = -Infinity;
    polygon.forEach((a, i) => {
      const b = polygon[(i + 1) % polygon.length], middle = y + 0.5;
      if (a.y > middle === b.y > middle) return;
      const x = a.x + ((middle - a.y) / (b.y - a.y)) * (b.x - a.x);
      left = Math.min(left, x);
      right = Math.max(right, x);
    });
    if (left >= right) continue;
    from[y] = Math.min(width, Math.max(0, Math.ceil(left - 0.5)));
    to[y] = Math.max(from[y], Math.min(width, Math.ceil(right - 0.5)));
  }
  return { width, height, from, to };
}

export function regionPixels(region: Region): number {
  return region.to.reduce((sum, to, y) => sum + to - region.from[y], 0);
}

/** Moves each side of a convex polygon, clockwise as seen, inwards. */
export function insetPolygon(polygon: readonly Point[], by: number): Point[] {
  const sides = polygon.map((a, i) => {
    const b = polygon[(i + 1) % polygon.length], length = Math.hypot(b.x - a.x, b.y - a.y) || 1;
    const nx = -(b.y - a.y) / length, ny = (b.x - a.x) / length;
    return { x: a.x + nx * by, y: a.y + ny * by, dx: b.x - a.x, dy: b.y - a.y };
  });
  return sides.map((side, i) => {
    const before = sides[(i + sides.length - 1) % sides.length];
    const across = before.dx * side.dy - before.dy * side.dx;
    if (across === 0) return { x: side.x, y: side.y };
    const t = ((side.x - before.x) * side.dy - (side.y - before.y) * side.dx) / across;
    return { x: before.x + t * before.dx, y: before.y + t * before.dy };
  });
}
