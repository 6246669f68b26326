/**
 * The border of a place, and the best place, by trying everything: no field, no tree, no bound. Slow and plain, to check the others by.
 * Ink outside is sampled along the ink's edges, so a negative border is right to the sampling step.
 */
import { outlineContains } from '../../server/engine/geometry/ring.ts';
import type { Outline, Point } from '../../server/engine/geometry/types.ts';

type Segment = [Point, Point];

export function segmentsOf(outline: Outline): Segment[] {
  return outline.rings.flatMap((ring) => ring.map((a, i): Segment => [a, ring[(i + 1) % ring.length]]));
}

export function pointToSegment(p: Point, [a, b]: Segment): number {
  const dx = b.x - a.x, dy = b.y - a.y, lengthSq = dx * dx + dy * dy;
  const t = lengthSq === 0 ? 0 : Math.max(0, Math.min(1, ((p.x - a.x) * dx + (p.y - a.y) * dy) / lengthSq));
  return Math.hypot(p.x - a.x - t * dx, p.y - a.y - t * dy);
}

function cross(a: Point, b: Point, c: Point): number {
  return (b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x);
}

function segmentDistance(s: Segment, t: Segment): number {
  if (cross(...s, t[0]) * cross(...s, t[1]) < 0 && cross(...t, s[0]) * cross(...t, s[1]) < 0) return 0;
  return Math.min(pointToSegment(s[0], t), pointToSegment(s[1], t), pointToSegment(t[0], s), pointToSegment(t[1], s));
}

export function bruteBorder(artwork: Outline, area: Outline, sampleMm = 0.05): number {
  const areaSegments = segmentsOf(area);
  const toEdge = (p: Point): number => Math.min(...areaSegments.map((s) => pointToSegment(p, s)));
  let deepest = 0;
  for (const [a, b] of segmentsOf(artwork)) {
    const steps = Math.max(1, Math.ceil(Math.hypot(b.x - a.x, b.y - a.y) / sampleMm));
    for (let i = 0; i < steps; i++) {
      const p = { x: a.x + ((b.x - a.x) * i) / steps, y: a.y + ((b.y - a.y) * i) / steps };
      if (!outlineContains(area, p)) deepest = Math.max(deepest, toEdge(p));
    }
  }
  if (deepest > 0) return -deepest;
  let least = Infinity;
  for (const s of segmentsOf(artwork)) for (const t of areaSegments) least = Math.min(least, segmentDistance(s, t));
  return least;
}

/** Best border over a grid of centres, then over finer grids round the best ones: the true best is better by less than the last step. */
export function bruteBest(artwork: Outline, area: Outline, centres: { left: number; right: number; top: number; bottom: number }, steps: number, rounds: number): { border: number; x: number; y: number; looks: number } {
  let best = { border: -Infinity, x: 0, y: 0 }, looks = 0;
  let frame = { ...centres };
  for (let round = 0; round < rounds; round++) {
    const dx = (frame.right - frame.left) / steps, dy = (frame.bottom - frame.top) / steps;
    for (let i = 0; i <= steps; i++) {
      for (let j = 0; j <= steps; j++) {
        const x = frame.left + i * dx, y = frame.top + j * dy;
        const border = bruteBorder({ rings: artwork.rings.map((ring) => ring.map((p) => ({ x: p.x + x, y: p.y + y }))) }, area, 0.2);
        looks++;
        if (border > best.border) best = { border, x, y };
      }
    }
    frame = { left: best.x - 1.5 * dx, right: best.x + 1.5 * dx, top: best.y - 1.5 * dy, bottom: best.y + 1.5 * dy };
  }
  return { ...best, looks };
}

/** Small seeded generator (G. Marsaglia, "Xorshift RNGs", Journal of Statistical Software 8, 2003), so that a failure can be repeated. */
export function seeded(seed: number): () => number {
  let state = (seed * 2654435761) >>> 0 || 1;
  return () => {
    state ^= state << 13;
    state >>>= 0;
    state ^= state >>> 17;
    state ^= state << 5;
    state >>>= 0;
    return state / 4294967296;
  };
}

/** A star-shaped ring with random radii: concave nearly always, never crossing itself. Starts at 0, 0. */
export function randomStar(random: () => number, corners: number, width: number, height: number, leastShare: number): Outline {
  const ring = Array.from({ length: corners }, (_, i) => {
    const angle = ((i + 0.7 * random()) / corners) * 2 * Math.PI;
    const share = leastShare + (1 - leastShare) * random();
    return { x: (width / 2) * share * Math.cos(angle), y: (height / 2) * share * Math.sin(angle) };
  });
  const left = Math.min(...ring.map((p) => p.x)), top = Math.min(...ring.map((p) => p.y));
  return { rings: [ring.map((p) => ({ x: p.x - left, y: p.y - top }))] };
}
