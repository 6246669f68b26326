/**
 * Turning, moving and mirroring of points and outlines. Angles are degrees clockwise as seen on the page (y down), so
 * rotate({ x: 1, y: 0 }, 90) is { x: 0, y: 1 }. Quarter turns are exact. Nothing is mutated.
 */
import type { Outline, Point } from './types.ts';

/** Sine and cosine that are exact at quarter turns, where Math.sin leaves 1e-16 behind. */
export function sinCos(angleDeg: number): { sin: number; cos: number } {
  const quarter = angleDeg / 90;
  if (Number.isInteger(quarter)) {
    const q = ((quarter % 4) + 4) % 4;
    return { sin: [0, 1, 0, -1][q], cos: [1, 0, -1, 0][q] };
  }
  const rad = (angleDeg * Math.PI) / 180;
  return { sin: Math.sin(rad), cos: Math.cos(rad) };
}

/** Turns p about `about` (the origin by default). */
export function rotatePoint(p: Point, angleDeg: number, about: Point = ORIGIN): Point {
  const { sin, cos } = sinCos(angleDeg);
  const x = p.x - about.x, y = p.y - about.y;
  return { x: about.x + cos * x - sin * y, y: about.y + sin * x + cos * y };
}
const ORIGIN: Point = { x: 0, y: 0 };

export function mapOutline(outline: Outline, map: (p: Point) => Point): Outline {
  return { rings: outline.rings.map((ring) => ring.map(map)) };
}

export function translateOutline(outline: Outline, dx: number, dy: number): Outline {
  return mapOutline(outline, (p) => ({ x: p.x + dx, y: p.y + dy }));
}

export function rotateOutline(outline: Outline, angleDeg: number, about?: Point): Outline {
  return mapOutline(outline, (p) => rotatePoint(p, angleDeg, about));
}
