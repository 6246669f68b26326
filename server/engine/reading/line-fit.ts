/**
 * Straight edges fitted to places, and where two of them meet. Places are any unit; nothing is mutated.
 */
import type { Point } from '../geometry/types.ts';

/** Through (x, y), along the unit vector (dx, dy). */
export interface Line { x: number; y: number; dx: number; dy: number }

/** Places this many times farther off than half of them are left out. */
const STRAY_TIMES = 2.5;
/** Keeps the limit above 0 where the places are exact, px. */
const LEAST_SPREAD = 0.05;

/** Total least squares, twice more without the places farthest off. At least two places. */
export function fitLine(points: readonly Point[]): Line {
  let kept = points, line = through(kept);
  for (let round = 0; round < 2; round++) {
    const off = kept.map((p) => Math.abs((p.x - line.x) * line.dy - (p.y - line.y) * line.dx));
    const limit = STRAY_TIMES * ([...off].sort((a, b) => a - b)[off.length >> 1] + LEAST_SPREAD);
    kept = kept.filter((_, i) => off[i] <= limit);
    line = through(kept);
  }
  return line;
}

function through(points: readonly Point[]): Line {
  const n = points.length, x = points.reduce((s, p) => s + p.x, 0) / n, y = points.reduce((s, p) => s + p.y, 0) / n;
  let xx = 0, xy = 0, yy = 0;
  for (const p of points) { xx += (p.x - x) ** 2; xy += (p.x - x) * (p.y - y); yy += (p.y - y) ** 2; }
  const angle = 0.5 * Math.atan2(2 * xy, xx - yy);
  return { x, y, dx: Math.cos(angle), dy: Math.sin(angle) };
}

/** Null for lines within 6° of parallel, which meet nowhere near. */
export function meetingPlace(one: Line, other: Line): Point | null {
  const across = one.dx * other.dy - one.dy * other.dx;
  if (Math.abs(across) < 0.1) return null;
  const t = ((other.x - one.x) * other.dy - (other.y - one.y) * other.dx) / across;
  return { x: one.x + t * one.dx, y: one.y + t * one.dy };
}
