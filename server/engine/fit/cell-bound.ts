/**
 * Linear upper bounds on the border near a place, for branch and bound: over a square of places of half diagonal r, what no place in it can
 * exceed. Plain Lipschitz (border + r) makes the search crawl along the ridges that long labels have, where the ink could move
 * sideways for nothing; a linear programme over the tightest pairs of ink and edge sees that up and down are both blocked.
 *
 * For ink p inside the area, the border is at most its distance to any one edge e. That distance is convex in the place:
 *   - linear, d + g·δ, while its foot stays on the edge and p does not reach it,
 *   - else at most d + g·δ + |δ|²/(2d) (from √(1 + t) ≤ 1 + t/2), with g the unit vector from the foot to p.
 * For a reflex corner v of the area and an ink edge the same holds with the roles changed. The hull's half-planes
 * hold for all places. Lengths mm. Rows are written into the given constraints; nothing else is mutated.
 */
import type { ConcaveArea } from './concave-area.ts';
import { addConstraint, type BorderConstraints } from './border-programme.ts';
import { inkDistance, outsideBox, type TurnedInk } from './border-in-area.ts';

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

function addInkBounds({ area, ink }: Surroundings, x: number, y: number, reach: number, r: number, out: BorderConstraints, climb: boolean): void {
  const { field } = area;
  const { tree } = ink;
  for (let i = 0; i < tree.nodes;) {
    if (field.signed(tree.x[i] + x, tree.y[i] + y) - tree.radius[i] > reach) { i = tree.after[i]; continue; }
    for (let e = tree.from[i]; e < tree.to[i]; e++) {
      const px = tree.ax[e] + x, py = tree.ay[e] + y;
      const signed = field.signed(px, py);
      if (signed <= reach && (signed > 0 || climb)) addPairs(area, px, py, signed, x, y, reach, r, out, climb);
    }
    i = tree.to[i] > tree.from[i] ? tree.after[i] : i + 1;
  }
}

/** The nearest edge to p, and the nearest that lies another way: a corridor blocks on both sides. */
function addPairs({ field }: ConcaveArea, px: number, py: number, signed: number, x: number, y: number, reach: number, r: number, out: BorderConstraints, climb: boolean): void {
  const candidates = field.candidates(px, py);
  const d = Math.abs(signed);
  let nearX = 0, nearY = 0, other = -1, otherSq = Infinity;
  for (let k = 0; k < candidates.length; k++) {
    const e = candidates[k], distSq = field.distSq(e, px, py);
    if (distSq > d * d * (1 + 1e-12) + 1e-18) continue;
    const t = field.shareAlong(e, px, py);
    nearX = px - field.ax[e] - t * field.dx[e];
    nearY = py - field.ay[e] - t * field.dy[e];
    addEdgeSlope(field, e, px, py, signed, x, y, r, out, climb);
    break;
  }
  if (signed <= 0) return;
  for (let k = 0; k < candidates.length; k++) {
    const e = candidates[k], distSq = field.distSq(e, px, py);
    if (distSq >= otherSq || distSq > reach * reach) continue;
    const t = field.shareAlong(e, px, py);
    const ex = px - field.ax[e] - t * field.dx[e], ey = py - field.ay[e] - t * field.dy[e];
    if (ex * nearX + ey * nearY < 0.5 * Math.sqrt(distSq) * d) { other = e; otherSq = distSq; }
  }
  if (other >= 0) addEdgeSlope(field, other, px, py, Math.sqrt(otherSq), x, y, r, out, climb);
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

function addCornerBounds({ area, ink }: Surroundings, x: number, y: number, reach: number, r: number, out: BorderConstraints, climb: boolean): void {
  const { field } = ink;
  for (const v of area.reflex) {
    const px = v.x - x, py = v.y - y;
    if (outsideBox(ink.box, px, py) > reach) continue;
    const d = -inkDistance(ink, px, py);
    if (d > reach || d < TOUCHING_MM || (d <= r && !climb)) continue;
    // In the unturned artwork's coordinates.
    const ux = ink.cos * px + ink.sin * py, uy = ink.cos * py - ink.sin * px;
    const candidates = field.candidates(ux, uy);
    for (let k = 0; k < candidates.length; k++) {
      const e = candidates[k];
      if (field.distSq(e, ux, uy) > d * d * (1 + 1e-12)) continue;
      const t = field.shareAlong(e, ux, uy), length = Math.hypot(field.dx[e], field.dy[e]);
      const wx = (ux - field.ax[e] - t * field.dx[e]) / d, wy = (uy - field.ay[e] - t * field.dy[e]) / d;
      // Ink that moves towards v comes nearer: the slope is against the way from ink to v, turned back onto the page.
      const gx = -(ink.cos * wx - ink.sin * wy), gy = -(ink.sin * wx + ink.cos * wy);
      addSlope(out, x, y, d, gx, gy, climb || (t * length >= r && (1 - t) * length >= r) ? 0 : (r * r) / (2 * d));
      break;
    }
  }
}
