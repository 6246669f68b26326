/**
 * Linear upper bounds on the border near a place, for branch and bound: over a square of places of half diagonal r, what no place in it can
 * exceed. Plain Lipschitz (border + r) makes the search crawl along the ridges that long labels have, where the ink could move
 * sideways for nothing; a linear programme over the tightest pairs of ink and edge sees that up and down are both blocked.
 *
 * For ink p inside the area, the border is at most its distance to any one edge e. That distance is convex in the place:
 *   - linear, d + g·δ, while its foot stays on the edge and p does not reach it,
 *   - else at most d + g·δ + |δ|²/(2d) (from √(1 + t) ≤ 1 + t/2), with g the unit vector from the foot to p.
 * For ink outside see addOutsideBound. For a reflex corner v of the area and an ink edge the same holds with the roles changed. The hull's half-planes
 * hold for all places. Lengths mm. Rows are written into the given constraints; nothing else is mutated.
 */
import type { DistanceField } from '../geometry/distance-field.ts';
import type { ConcaveArea } from './concave-area.ts';
import { addConstraint, type BorderConstraints } from './border-programme.ts';
import { outsideBox, unturned, type TurnedInk } from './border-in-area.ts';

export interface Surroundings { area: ConcaveArea; ink: TurnedInk; /** Of the area's hull, for every place. */ hull: BorderConstraints }

/**
 * Adds all pairs that can matter within r of (x, y), where the border is `border`. With `climb` ink outside the area gets the slope it has
 * here, right only nearby: good to move by, no proof.
 */
export function addLocalBounds(s: Surroundings, x: number, y: number, border: number, r: number, out: BorderConstraints, climb: boolean): void {
  const reach = border + 2 * r;
  addHullBounds(s.hull, x, y, reach, out);
  addConstraint(out, 0, 0, 1, border + r);
  addInkBounds(s, x, y, reach, r, out, climb);
  if (border > 0) addCornerBounds(s, x, y, reach, r, out, climb);
}

export function addHullBounds(hull: BorderConstraints, x: number, y: number, reach: number, out: BorderConstraints): void {
  const { rows } = hull;
  for (let i = 0; i < hull.count * 4; i += 4) {
    if (rows[i + 3] - rows[i] * x - rows[i + 1] * y <= reach) addConstraint(out, rows[i], rows[i + 1], 1, rows[i + 3]);
  }
}

/** b ≤ d + g·(place − (x, y)) + err, as a row. */
function addSlope(out: BorderConstraints, x: number, y: number, d: number, gx: number, gy: number, err: number): void {
  addConstraint(out, -gx, -gy, 1, d + err - gx * x - gy * y);
}

/** Larger ink is held from several sides by several of its points; a dot or a stroke has only itself. */
const FEW_EDGES = 24;

function addInkBounds({ area, ink }: Surroundings, x: number, y: number, reach: number, r: number, out: BorderConstraints, climb: boolean): void {
  const { field } = area;
  const { tree } = ink;
  for (let i = 0; i < tree.nodes;) {
    if (field.signed(tree.x[i] + x, tree.y[i] + y) - tree.radius[i] > reach) { i = tree.after[i]; continue; }
    for (let e = tree.from[i]; e < tree.to[i]; e++) {
      const px = tree.ax[e] + x, py = tree.ay[e] + y;
      const signed = field.signed(px, py);
      if (signed > reach) continue;
      const near = field.nearestEdge;
      if (signed <= 0 && !climb) { addOutsideBound(field, near, px, py, signed, x, y, r, out); continue; }
      addEdgeSlope(field, near, px, py, signed, x, y, r, out, climb);
      if (tree.edges <= FEW_EDGES && signed > 0) addOtherWay(area, near, px, py, signed, x, y, reach, r, out);
    }
    i = tree.to[i] > tree.from[i] ? tree.after[i] : i + 1;
  }
}

/** The nearest edge that lies another way than the nearest of all: a corridor blocks on both sides. */
function addOtherWay({ field }: ConcaveArea, near: number, px: number, py: number, d: number, x: number, y: number, reach: number, r: number, out: BorderConstraints): void {
  const t = field.shareAlong(near, px, py);
  const nearX = px - field.ax[near] - t * field.dx[near], nearY = py - field.ay[near] - t * field.dy[near];
  const candidates = field.candidates(px, py);
  let other = -1, otherSq = reach * reach;
  for (let k = 0; k < candidates.length; k++) {
    const e = candidates[k], distSq = field.distSq(e, px, py);
    if (distSq >= otherSq) continue;
    const u = field.shareAlong(e, px, py);
    const ex = px - field.ax[e] - u * field.dx[e], ey = py - field.ay[e] - u * field.dy[e];
    if (ex * nearX + ey * nearY < 0.5 * Math.sqrt(distSq) * d) { other = e; otherSq = distSq; }
  }
  if (other >= 0) addEdgeSlope(field, other, px, py, Math.sqrt(otherSq), x, y, r, out, false);
}

/**
 * Ink outside: its depth is the least of its distances to all edges that can come near, each at least its tangent d(e) + g(e)·δ. Against
 * the slope g of the nearest, an edge that pulls another way loses |g(e) − g|·r at most, less what it is farther off.
 */
function addOutsideBound(field: DistanceField, near: number, px: number, py: number, signed: number, x: number, y: number, r: number, out: BorderConstraints): void {
  const d = -signed;
  if (d < TOUCHING_MM) return;
  const candidates = field.candidatesWithin(px, py, r);
  const [gx, gy] = slopeFrom(field, near, px, py, d);
  let err = 0;
  for (let k = 0; k < candidates.length; k++) {
    const e = candidates[k], dist = Math.sqrt(field.distSq(e, px, py));
    if (dist >= d + 2 * r) continue;
    const [ex, ey] = slopeFrom(field, e, px, py, dist);
    err = Math.max(err, Math.hypot(ex - gx, ey - gy) * r - (dist - d));
  }
  // No better than the plain bound.
  if (err < r) addSlope(out, x, y, signed, -gx, -gy, err);
}

/** Unit vector from an edge's nearest point to p. */
function slopeFrom(field: DistanceField, e: number, px: number, py: number, dist: number): [number, number] {
  const t = field.shareAlong(e, px, py);
  return [(px - field.ax[e] - t * field.dx[e]) / dist, (py - field.ay[e] - t * field.dy[e]) / dist];
}

function addEdgeSlope(field: ConcaveArea['field'], e: number, px: number, py: number, signed: number, x: number, y: number, r: number, out: BorderConstraints, climb: boolean): void {
  const d = Math.abs(signed);
  const t = field.shareAlong(e, px, py);
  const fx = px - field.ax[e] - t * field.dx[e], fy = py - field.ay[e] - t * field.dy[e];
  if (d < TOUCHING_MM) return;
  if (climb) { addSlope(out, x, y, signed, fx / signed, fy / signed, 0); return; }
  if (d <= r) return; // p may reach the edge: the plain bound, border + r, stands.
  const length = Math.hypot(field.dx[e], field.dy[e]);
  const staysOnEdge = t * length >= r && (1 - t) * length >= r;
  addSlope(out, x, y, d, fx / d, fy / d, staysOnEdge ? 0 : (r * r) / (2 * d));
}
/** No direction can be told of a distance below rounding. */
const TOUCHING_MM = 1e-9;

/** Short edges need no rows of their own: their ends have them. */
function addCornerBounds({ area, ink }: Surroundings, x: number, y: number, reach: number, r: number, out: BorderConstraints, climb: boolean): void {
  const { longEdges } = ink;
  if (longEdges === null) return;
  for (const group of area.reflex) {
    const gx = group.x - x, gy = group.y - y, within = reach + group.radius;
    if (outsideBox(ink.box, gx, gy) > within) continue;
    const g = unturned(ink, gx, gy);
    if (Math.abs(longEdges.signed(g.x, g.y)) > within) continue;
    for (const v of group.corners) {
      if (outsideBox(ink.box, v.x - x, v.y - y) <= reach) addCorner(ink, longEdges, v.x - x, v.y - y, x, y, reach, r, out, climb);
    }
  }
}

/** The corner at (px, py) from the artwork's centre, and the ink's long edge that is nearest to it. */
function addCorner(ink: TurnedInk, edges: DistanceField, px: number, py: number, x: number, y: number, reach: number, r: number, out: BorderConstraints, climb: boolean): void {
  const u = unturned(ink, px, py);
  const d = Math.abs(edges.signed(u.x, u.y));
  if (d > reach || d < TOUCHING_MM || (d <= r && !climb)) return;
  const candidates = edges.candidates(u.x, u.y);
  for (let k = 0; k < candidates.length; k++) {
    const e = candidates[k];
    if (edges.distSq(e, u.x, u.y) > d * d * (1 + 1e-12)) continue;
    const t = edges.shareAlong(e, u.x, u.y), length = Math.hypot(edges.dx[e], edges.dy[e]);
    const wx = (u.x - edges.ax[e] - t * edges.dx[e]) / d, wy = (u.y - edges.ay[e] - t * edges.dy[e]) / d;
    // Ink that moves towards the corner comes nearer: the slope is against the way from ink to corner, turned back onto the page.
    const gx = -(ink.cos * wx - ink.sin * wy), gy = -(ink.sin * wx + ink.cos * wy);
    const staysOnEdge = t * length >= r && (1 - t) * length >= r;
    addSlope(out, x, y, d, gx, gy, climb || staysOnEdge ? 0 : (r * r) / (2 * d));
    return;
  }
}
