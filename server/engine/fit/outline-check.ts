/**
 * Whether a traced or imported outline can be a die: finite points, at least one ring with an area, no ring that crosses itself
 * or another. Input: anything. Output: a sentence for the person, or null. Nothing is mutated.
 *
 * Crossings are found by a sweep over the edges' left ends (J. L. Bentley, T. Ottmann 1979, without their tree: edges of an
 * outline are short, so few are open at a time). Cost O(n log n + n·k) with k edges open side by side.
 */
import { convexHull } from '../geometry/hull.ts';
import { signedArea } from '../geometry/ring.ts';
import type { Outline, Point, Ring } from '../geometry/types.ts';

/** A metre each way, as for all lengths. */
const LARGEST_MM = 1000;
/** Below this nothing can be cut: a speck. */
const SMALLEST_AREA_MM2 = 1;

export function outlineFault(outline: unknown): string | null {
  const fault = outlineDrawingFault(outline);
  if (fault !== null) return fault;
  const { rings } = outline as Outline;
  const crossing = findCrossing({ rings });
  if (crossing !== null) return `The outline crosses itself near ${crossing.x.toFixed(1)}, ${crossing.y.toFixed(1)} mm.`;
  return rings.some((ring) => Math.abs(signedArea(ring)) >= SMALLEST_AREA_MM2) ? null : 'The outline is a speck: nothing can be cut with it.';
}

/** Only what makes drawing and fitting impossible: rings that cross can still be filled even-odd. */
export function outlineDrawingFault(outline: unknown): string | null {
  if (!isOutline(outline)) return 'The outline has no rings of points.';
  const rings = outline.rings.filter((ring) => ring.length > 0);
  if (!rings.flat().every((p) => Math.abs(p.x) <= LARGEST_MM * 10 && Math.abs(p.y) <= LARGEST_MM * 10)) return 'The outline has points that are no numbers or lie far outside.';
  // A ring that crosses itself may have as much area on one side as on the other: its hull tells whether it has any.
  return rings.some((ring) => signedArea(convexHull(ring)) > 0) ? null : 'The outline encloses no area.';
}

function isOutline(value: unknown): value is Outline {
  if (typeof value !== 'object' || value === null) return false;
  const rings = (value as { rings?: unknown }).rings;
  return Array.isArray(rings) && rings.length > 0 && rings.every((ring) => Array.isArray(ring) && ring.every(isPoint));
}

function isPoint(value: unknown): value is Point {
  if (typeof value !== 'object' || value === null) return false;
  const { x, y } = value as Partial<Point>;
  return typeof x === 'number' && typeof y === 'number';
}

interface Edge { a: Point; b: Point; left: number; right: number; top: number; bottom: number }

/** A place where two edges truly cross (meeting at a common end or lying along each other is no crossing), or null. */
export function findCrossing(outline: Outline): Point | null {
  const edges = outline.rings.flatMap(ringEdges).sort((p, q) => p.left - q.left);
  let open: Edge[] = [];
  for (const edge of edges) {
    open = open.filter((other) => other.right >= edge.left);
    for (const other of open) {
      if (other.bottom < edge.top || other.top > edge.bottom) continue;
      const at = crossingOf(edge, other);
      if (at !== null) return at;
    }
    open.push(edge);
  }
  return null;
}

function ringEdges(ring: Ring): Edge[] {
  return ring.map((a, i) => {
    const b = ring[(i + 1) % ring.length];
    return { a, b, left: Math.min(a.x, b.x), right: Math.max(a.x, b.x), top: Math.min(a.y, b.y), bottom: Math.max(a.y, b.y) };
  });
}

function crossingOf(e: Edge, f: Edge): Point | null {
  const d1 = side(e.a, e.b, f.a), d2 = side(e.a, e.b, f.b), d3 = side(f.a, f.b, e.a), d4 = side(f.a, f.b, e.b);
  if (!(d1 * d2 < 0 && d3 * d4 < 0)) return null;
  const t = d1 / (d1 - d2);
  return { x: f.a.x + (f.b.x - f.a.x) * t, y: f.a.y + (f.b.y - f.a.y) * t };
}

/** Sign of the side of line ab on which p lies; 0 within rounding. */
function side(a: Point, b: Point, p: Point): number {
  const cross = (b.x - a.x) * (p.y - a.y) - (b.y - a.y) * (p.x - a.x);
  return Math.abs(cross) < 1e-9 ? 0 : cross;
}
