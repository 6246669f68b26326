/**
 * True nearest distances between pieces of ink, and the minimum spanning tree over them (J. Kruskal, 1956).
 *
 * Input: pieces as closed rings in any one unit; not mutated. Output: for n pieces n − 1 links in ascending order, each with its distance and the
 * two places between which it is measured. Ties go to the earlier pieces, so that the answer does not depend on the order of search.
 *
 * Distances between boxes bound those between pieces from below: pairs are measured in ascending order of the bound, and only while they
 * could still join two trees. Pairs are gathered in bands of box distance, doubled until one tree is left. Cost: about linear for pages of
 * text; quadratic at worst.
 */
import type { Box, Outline, Point, Ring } from '../geometry/types.ts';
import { outlineBox } from '../geometry/ring.ts';

export interface Gap { distance: number; from: Point; to: Point }
export interface Link extends Gap { a: number; b: number }

interface Chunk { box: Box; ring: Ring; start: number; end: number }
interface Piece { box: Box; chunks: Chunk[] }

/** Segments of a ring that share one box; 12 keeps both the boxes and the comparisons few. */
const CHUNK_SEGMENTS = 12;

export function spanningLinks(outlines: readonly Outline[]): Link[] {
  const pieces = outlines.map(toPiece);
  const trees = new DisjointSets(pieces.length);
  const links: Link[] = [];
  let reach = 2 * medianSide(pieces);
  let waiting: Candidate[] = [];
  for (let least = -1; links.length < pieces.length - 1; least = reach, reach *= 2) {
    if (!Number.isFinite(reach)) throw new RangeError('Pieces of ink must lie at finite places.');
    waiting = waiting.concat(boxPairs(pieces, least, reach, trees));
    waiting = joinNearest(pieces, waiting, reach, trees, links);
  }
  return links;
}

interface Candidate { a: number; b: number; bound: number; gap: Gap | null }

const before = (p: Candidate, q: Candidate) => p.bound - q.bound || Number(p.gap === null ? 0 : 1) - Number(q.gap === null ? 0 : 1) || p.a - q.a || p.b - q.b;

/** Takes candidates in order as long as nothing nearer can turn up; answers with those that must wait for the next band. */
function joinNearest(pieces: readonly Piece[], candidates: Candidate[], reach: number, trees: DisjointSets, links: Link[]): Candidate[] {
  const heap = new Heap(candidates);
  const left: Candidate[] = [];
  for (let next = heap.pop(); next; next = heap.pop()) {
    if (trees.find(next.a) === trees.find(next.b)) continue;
    if (next.bound > reach) { left.push(next); continue; }
    if (next.gap === null) {
      const gap = nearestGap(pieces[next.a], pieces[next.b]);
      heap.push({ ...next, bound: gap.distance, gap });
    } else {
      trees.join(next.a, next.b);
      links.push({ a: next.a, b: next.b, ...next.gap });
    }
  }
  return left;
}

/** Pairs whose boxes are more than `least` and at most `reach` apart, by a sweep from left to right. */
function boxPairs(pieces: readonly Piece[], least: number, reach: number, trees: DisjointSets): Candidate[] {
  const order = pieces.map((_, i) => i).sort((i, j) => pieces[i].box.x - pieces[j].box.x || i - j);
  const pairs: Candidate[] = [];
  let active: number[] = [];
  for (const i of order) {
    const box = pieces[i].box;
    active = active.filter((j) => pieces[j].box.x + pieces[j].box.w + reach >= box.x);
    for (const j of active) {
      const bound = boxDistance(pieces[j].box, box);
      if (bound > least && bound <= reach && trees.find(i) !== trees.find(j)) pairs.push({ a: Math.min(i, j), b: Math.max(i, j), bound, gap: null });
    }
    active.push(i);
  }
  return pairs;
}

export function boxDistance(p: Box, q: Box): number {
  const dx = Math.max(0, q.x - p.x - p.w, p.x - q.x - q.w), dy = Math.max(0, q.y - p.y - p.h, p.y - q.y - q.h);
  return Math.hypot(dx, dy);
}

function medianSide(pieces: readonly Piece[]): number {
  const sides = pieces.map((p) => Math.max(p.box.w, p.box.h)).sort((a, b) => a - b);
  return sides[sides.length >> 1] || 1;
}

/** Nearest distance between the edges of two outlines; 0 where they cross. */
export function outlineGap(one: Outline, other: Outline): Gap {
  return nearestGap(toPiece(one), toPiece(other));
}

/** From a place to the edge of an outline. */
export function distanceToOutline(p: Point, outline: Outline): number {
  let best = Infinity;
  for (const ring of outline.rings) ring.forEach((a, i) => { best = Math.min(best, Math.sqrt(toSegment(p, a, ring[(i + 1) % ring.length]).distanceSq)); });
  return best;
}

function toPiece(outline: Outline): Piece {
  const chunks: Chunk[] = [];
  for (const ring of outline.rings) {
    for (let start = 0; start < ring.length; start += CHUNK_SEGMENTS) {
      const end = Math.min(ring.length, start + CHUNK_SEGMENTS);
      const points: Point[] = [];
      for (let i = start; i <= end; i++) points.push(ring[i % ring.length]);
      chunks.push({ box: outlineBox({ rings: [points] }), ring, start, end });
    }
  }
  return { box: outlineBox(outline), chunks };
}

function nearestGap(one: Piece, other: Piece): Gap {
  let best: Gap = { distance: Infinity, from: { x: 0, y: 0 }, to: { x: 0, y: 0 } };
  const near = one.chunks.map((chunk) => ({ chunk, bound: boxDistance(chunk.box, other.box) })).sort((p, q) => p.bound - q.bound);
  for (const { chunk, bound } of near) {
    if (bound >= best.distance) break;
    for (const across of other.chunks) if (boxDistance(chunk.box, across.box) < best.distance) best = chunkGap(chunk, across, best);
  }
  return best;
}

function chunkGap(one: Chunk, other: Chunk, best: Gap): Gap {
  for (let i = one.start; i < one.end; i++) {
    const a = one.ring[i], b = one.ring[(i + 1) % one.ring.length];
    for (let j = other.start; j < other.end; j++) {
      const c = other.ring[j], d = other.ring[(j + 1) % other.ring.length];
      const gap = segmentGap(a, b, c, d, best.distance);
      if (gap) best = gap;
    }
  }
  return best;
}

/** Null unless nearer than `than`. Without crossing the nearest places include an end of one of the two segments. */
function segmentGap(a: Point, b: Point, c: Point, d: Point, than: number): Gap | null {
  const cross = segmentsCross(a, b, c, d);
  if (cross) return than > 0 ? { distance: 0, from: cross, to: cross } : null;
  let bestSq = than * than, best: Gap | null = null;
  const offer = (p: Point, s: Point, e: Point, swapped: boolean) => {
    const { distanceSq, place } = toSegment(p, s, e);
    if (distanceSq < bestSq) {
      bestSq = distanceSq;
      best = { distance: Math.sqrt(distanceSq), from: swapped ? place : p, to: swapped ? p : place };
    }
  };
  offer(a, c, d, false); offer(b, c, d, false); offer(c, a, b, true); offer(d, a, b, true);
  return best;
}

function toSegment(p: Point, a: Point, b: Point): { distanceSq: number; place: Point } {
  const dx = b.x - a.x, dy = b.y - a.y, lengthSq = dx * dx + dy * dy;
  const t = lengthSq === 0 ? 0 : Math.min(1, Math.max(0, ((p.x - a.x) * dx + (p.y - a.y) * dy) / lengthSq));
  const place = { x: a.x + t * dx, y: a.y + t * dy };
  return { distanceSq: (p.x - place.x) ** 2 + (p.y - place.y) ** 2, place };
}

/** The place where two segments cross or touch; null where they do not, or lie along one another. */
export function segmentsCross(a: Point, b: Point, c: Point, d: Point): Point | null {
  const rx = b.x - a.x, ry = b.y - a.y, sx = d.x - c.x, sy = d.y - c.y;
  const across = rx * sy - ry * sx;
  if (across === 0) return null;
  const t = ((c.x - a.x) * sy - (c.y - a.y) * sx) / across, u = ((c.x - a.x) * ry - (c.y - a.y) * rx) / across;
  return t >= 0 && t <= 1 && u >= 0 && u <= 1 ? { x: a.x + t * rx, y: a.y + t * ry } : null;
}

export class DisjointSets {
  private readonly parent: number[];

  constructor(size: number) {
    this.parent = Array.from({ length: size }, (_, i) => i);
  }
  find(i: number): number {
    const { parent } = this;
    while (parent[i] !== i) i = parent[i] = parent[parent[i]];
    return i;
  }
  /** The lower number leads. */
  join(a: number, b: number): void {
    const one = this.find(a), other = this.find(b);
    if (one !== other) this.parent[Math.max(one, other)] = Math.min(one, other);
  }
}

/** Binary heap, the first in `before` on top. */
class Heap {
  private readonly items: Candidate[];

  constructor(items: Candidate[]) {
    this.items = items;
    for (let i = (items.length >> 1) - 1; i >= 0; i--) this.sink(i);
  }
  push(item: Candidate): void {
    const { items } = this;
    let i = items.push(item) - 1;
    for (let up = (i - 1) >> 1; i > 0 && before(item, items[up]) < 0; i = up, up = (i - 1) >> 1) items[i] = items[up];
    items[i] = item;
  }
  pop(): Candidate | undefined {
    const { items } = this, top = items[0], last = items.pop();
    if (last && items.length > 0) { items[0] = last; this.sink(0); }
    return top;
  }
  private sink(i: number): void {
    const { items } = this, item = items[i];
    for (let down = 2 * i + 1; down < items.length; i = down, down = 2 * i + 1) {
      if (down + 1 < items.length && before(items[down + 1], items[down]) < 0) down++;
      if (before(item, items[down]) <= 0) break;
      items[i] = items[down];
    }
    items[i] = item;
  }
}
