/**
 * Distance and depth between convex polygons, and their no-fit polygons.
 *
 * Rings are convex, clockwise as seen on the page (as hull.ts gives them), in any unit; a single point and a segment are taken
 * as well. Nothing is mutated. The separation of two convex sets is their distance where they are apart, and minus the least
 * shift that parts them where they overlap: both are the signed distance of the origin from the Minkowski difference, whose
 * edges are those of the two polygons (C. Ericson, Real-Time Collision Detection, 2005, 9.2; the no-fit polygon of convex
 * shapes is the same set, R. C. Art, 1966). Cost O(n + m) for n and m corners.
 */
import type { Point, Ring } from './types.ts';

/** Corners nearer than this are one: rounding when equal edges meet. */
const SAME_MM = 1e-9;

/**
 * Positions of b (its origin) at which it touches or overlaps a standing at its own origin: the ring of a ⊕ (−b). Inside:
 * overlap; on the edge: touch; outside: the distance to the ring is the distance of the shapes.
 */
export function noFitPolygon(a: Ring, b: Ring): Ring {
  const minusB = b.map(({ x, y }) => ({ x: -x, y: -y }));
  return minkowskiSum(a, minusB);
}

/** Merges the edges of both rings by direction. */
export function minkowskiSum(a: Ring, b: Ring): Ring {
  const p = fromTop(a), q = fromTop(b);
  const sum: Ring = [];
  let i = 0, j = 0;
  while (i < p.length || j < q.length) {
    add(sum, p[i % p.length].x + q[j % q.length].x, p[i % p.length].y + q[j % q.length].y);
    if (i === p.length) j++;
    else if (j === q.length) i++;
    else {
      const turn = crossOfEdges(p, i, q, j);
      if (turn >= 0) i++;
      if (turn <= 0) j++;
    }
  }
  const first = sum[0], last = sum[sum.length - 1];
  if (sum.length > 1 && Math.abs(first.x - last.x) < SAME_MM && Math.abs(first.y - last.y) < SAME_MM) sum.pop();
  return sum;
}

/** Starts at the topmost, then leftmost corner, so that edge directions run from 0° through 360° in both rings. */
function fromTop(ring: Ring): Ring {
  let best = 0;
  for (let i = 1; i < ring.length; i++) if (ring[i].y < ring[best].y || (ring[i].y === ring[best].y && ring[i].x < ring[best].x)) best = i;
  return [...ring.slice(best), ...ring.slice(0, best)];
}

function add(ring: Ring, x: number, y: number): void {
  const last = ring[ring.length - 1];
  if (!last || Math.abs(last.x - x) > SAME_MM || Math.abs(last.y - y) > SAME_MM) ring.push({ x, y });
}

function crossOfEdges(p: Ring, i: number, q: Ring, j: number): number {
  const a = p[i], b = p[(i + 1) % p.length], c = q[j], d = q[(j + 1) % q.length];
  const ux = b.x - a.x, uy = b.y - a.y, vx = d.x - c.x, vy = d.y - c.y;
  const cross = ux * vy - uy * vx;
  // Opposite directions have no cross product either; the one that points away from 0° comes second.
  if (cross === 0 && ux * vx + uy * vy < 0) return halfTurn(ux, uy) - halfTurn(vx, vy) < 0 ? 1 : -1;
  return cross;
}

const halfTurn = (x: number, y: number): number => (y > 0 || (y === 0 && x > 0) ? 0 : 1);

/** Signed distance of (x, y) from a convex ring: positive outside, negative inside (to the nearest edge). */
export function distanceToConvex(ring: Ring, x: number, y: number): number {
  const n = ring.length;
  if (n === 1) return Math.hypot(x - ring[0].x, y - ring[0].y);
  let deepest = -Infinity;
  let outside = Infinity;
  for (let i = 0; i < n; i++) {
    const a = ring[i], b = ring[i + 1 === n ? 0 : i + 1];
    const ex = b.x - a.x, ey = b.y - a.y;
    const length = Math.sqrt(ex * ex + ey * ey);
    if (length === 0) continue;
    const px = x - a.x, py = y - a.y;
    // Clockwise on the page: the outside lies to the left of each edge, the normal (ey, −ex).
    const out = (px * ey - py * ex) / length;
    if (out > deepest) deepest = out;
    if (out > 0 || n === 2) {
      const along = (px * ex + py * ey) / length;
      const beyond = along < 0 ? -along : along > length ? along - length : 0;
      const away = Math.sqrt(out * out + beyond * beyond);
      if (away < outside) outside = away;
    }
  }
  if (n === 2) return outside;
  return deepest > 0 ? outside : deepest;
}

/** Distance of two convex polygons where they stand; minus the least shift that parts them where they overlap. */
export function convexSeparation(a: Ring, b: Ring): number {
  return distanceToConvex(noFitPolygon(a, b), 0, 0);
}

export function translateRing(ring: Ring, dx: number, dy: number): Ring {
  return ring.map(({ x, y }) => ({ x: x + dx, y: y + dy }));
}

/** Length once round. */
export function perimeter(ring: Ring): number {
  let sum = 0;
  for (let i = 0, j = ring.length - 1; i < ring.length; j = i++) sum += Math.hypot(ring[i].x - ring[j].x, ring[i].y - ring[j].y);
  return ring.length > 2 ? sum : sum / 2;
}

/**
 * A convex ring around the grown one: each edge moved out by d, corners cut by one more edge where they are sharper than a
 * right angle. Its edges are exactly d away; its corners a little more.
 */
export function growConvex(ring: Ring, d: number): Ring {
  if (d === 0 && ring.length > 2) return ring;
  const normals = edgeNormals(ring);
  const all: Point[] = [];
  normals.forEach((n, i) => {
    all.push(n);
    const next = normals[(i + 1) % normals.length];
    if (n.x * next.x + n.y * next.y < -1e-9 && normals.length > 1) {
      const x = n.x + next.x, y = n.y + next.y, length = Math.hypot(x, y);
      all.push(length > 1e-9 ? { x: x / length, y: y / length } : { x: -n.y, y: n.x });
    }
  });
  // Support of the ring plus d along each normal; neighbouring lines meet in the corners.
  const support = all.map((n) => ring.reduce((far, p) => Math.max(far, p.x * n.x + p.y * n.y), -Infinity) + d);
  const corners: Ring = [];
  all.forEach((n, i) => {
    const k = (i + 1) % all.length, m = all[k];
    const det = n.x * m.y - n.y * m.x;
    if (Math.abs(det) < 1e-12) return;
    add(corners, (support[i] * m.y - support[k] * n.y) / det, (n.x * support[k] - m.x * support[i]) / det);
  });
  return corners;
}

function edgeNormals(ring: Ring): Point[] {
  if (ring.length < 3) {
    const [a, b = a] = ring;
    const ex = b.x - a.x, ey = b.y - a.y, length = Math.hypot(ex, ey);
    const ux = length > 0 ? ex / length : 1, uy = length > 0 ? ey / length : 0;
    return [{ x: uy, y: -ux }, { x: ux, y: uy }, { x: -uy, y: ux }, { x: -ux, y: -uy }];
  }
  return ring.map((a, i) => {
    const b = ring[(i + 1) % ring.length];
    const ex = b.x - a.x, ey = b.y - a.y, length = Math.hypot(ex, ey);
    return { x: ey / length, y: -ex / length };
  });
}
