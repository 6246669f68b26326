/**
 * The thinnest stroke of a piece of ink: how fine a line the ink must still print.
 *
 * Input: an outline in any unit, ink inside; not mutated. Output: the width across the stroke, in that unit, that all but THINNEST_SHARE of the
 * outline's length exceeds; null where no two edges face one another. From the middle of every edge the width is measured straight
 * across, and counts only where the edge met there runs nearly parallel, so that ends and corners of strokes do not count as thin.
 * Cost: quadratic in the number of edges, of which at most MAX_PROBES are asked.
 */
import type { Outline, Point } from '../geometry/types.ts';

const MAX_PROBES = 400;
/** Single notches and noise of a scan's edge are no strokes. */
const THINNEST_SHARE = 0.05;
/** Cosine between the two edges' directions: within 37° of facing one another. */
const FACING = -0.8;

export function thinnestStroke(outline: Outline): number | null {
  const edges: { a: Point; b: Point; length: number }[] = [];
  for (const ring of outline.rings) {
    ring.forEach((a, i) => {
      const b = ring[(i + 1) % ring.length], length = Math.hypot(b.x - a.x, b.y - a.y);
      if (length > 0) edges.push({ a, b, length });
    });
  }
  const step = Math.max(1, Math.floor(edges.length / MAX_PROBES));
  const widths: { width: number; length: number }[] = [];
  for (let i = 0; i < edges.length; i += step) {
    const width = widthAcross(edges, i);
    if (width !== null) widths.push({ width, length: edges[i].length });
  }
  widths.sort((p, q) => p.width - q.width);
  const total = widths.reduce((sum, w) => sum + w.length, 0);
  let passed = 0;
  for (const { width, length } of widths) {
    passed += length;
    if (passed >= THINNEST_SHARE * total) return width;
  }
  return null;
}

function widthAcross(edges: readonly { a: Point; b: Point; length: number }[], i: number): number | null {
  const { a, b, length } = edges[i];
  const mx = (a.x + b.x) / 2, my = (a.y + b.y) / 2;
  // Ink lies to the right of the direction of travel, which is (−dy, dx) with y down.
  const nx = -(b.y - a.y) / length, ny = (b.x - a.x) / length;
  let nearest = Infinity, facing = 0;
  for (let j = 0; j < edges.length; j++) {
    if (j === i) continue;
    const { a: c, b: d } = edges[j];
    const sc = (c.x - mx) * ny - (c.y - my) * nx, sd = (d.x - mx) * ny - (d.y - my) * nx;
    if (sc > 0 === sd > 0) continue;
    const t = sc / (sc - sd), along = (c.x + t * (d.x - c.x) - mx) * nx + (c.y + t * (d.y - c.y) - my) * ny;
    if (along <= 0 || along >= nearest) continue;
    nearest = along;
    facing = ((d.x - c.x) * (b.x - a.x) + (d.y - c.y) * (b.y - a.y)) / (length * edges[j].length);
  }
  return facing < FACING ? nearest : null;
}
