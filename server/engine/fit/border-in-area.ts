/**
 * The border of an artwork at one place in an area that need not be convex: the least distance of all its ink to the area's edge, or, where
 * not all ink is inside, minus the greatest distance of ink outside.
 *
 * Exact where all ink is inside: a nearest pair of ink and edge has a corner of one of them, so corners of the ink are asked of the
 * area's field and reflex corners of the area of the ink's field; edges that could cross without a corner inside are looked at
 * one by one. Where ink is outside, its edges are halved until none can hold a place more than DEPTH_EPS_MM farther out.
 * Lengths mm, die coordinates; the artwork is turned about its centre, which stands at (x, y). Cost: a few dozen field questions.
 */
import type { DistanceField } from '../geometry/distance-field.ts';
import { sinCos } from '../geometry/transform.ts';
import type { Box, Point } from '../geometry/types.ts';
import type { ConcaveArea } from './concave-area.ts';
import { turnInkTree, type InkTree } from './ink-tree.ts';
import type { PreparedArtwork, TurnedArtwork } from './prepared.ts';

export interface TurnedInk {
  tree: InkTree;
  /** Of the unturned artwork. */
  field: DistanceField;
  /** Likewise, of its long edges alone. */
  longEdges: DistanceField | null;
  sin: number;
  cos: number;
  /** Of the turned ink, relative to its centre. */
  box: Box;
}

/** The artwork's box is that of the turned ink. */
export function turnedInk(artwork: PreparedArtwork, { angleDeg, box }: TurnedArtwork): TurnedInk {
  const { tree, field, longEdges } = artwork.ink();
  return { tree: turnInkTree(tree, angleDeg), field, longEdges, box, ...sinCos(angleDeg) };
}

/** Ink farther out than what was found by less than this is not looked for. */
export const DEPTH_EPS_MM = 1e-3;

/** May return early, with some value below `below`, once the border is known to be below it. */
export function borderInArea(area: ConcaveArea, ink: TurnedInk, x: number, y: number, below = -Infinity): number {
  const { field } = area;
  const { tree } = ink;
  let border = Infinity;
  for (let k = 0; k < tree.outermost.length; k++) {
    const e = tree.outermost[k];
    border = Math.min(border, field.signed(tree.ax[e] + x, tree.ay[e] + y));
    if (border < below) return border;
  }
  for (let i = 0; i < tree.nodes;) {
    // No ink of this circle can be lower than its middle less its radius.
    const least = field.signed(tree.x[i] + x, tree.y[i] + y) - tree.radius[i];
    if (least >= border) { i = tree.after[i]; continue; }
    for (let e = tree.from[i]; e < tree.to[i]; e++) {
      const ax = tree.ax[e] + x, ay = tree.ay[e] + y;
      const atA = field.signed(ax, ay);
      if (atA < border) border = atA;
      if (least < 0) border = lowestOnEdge(field, ax, ay, atA, tree.bx[e] + x, tree.by[e] + y, field.signed(tree.bx[e] + x, tree.by[e] + y), border, below);
    }
    if (border < below) return border;
    i = tree.to[i] > tree.from[i] ? tree.after[i] : i + 1;
  }
  return withReflexCorners(area, ink, x, y, border);
}

function withReflexCorners(area: ConcaveArea, ink: TurnedInk, x: number, y: number, soFar: number): number {
  let border = soFar;
  for (const group of area.reflex) {
    if (border <= 0) break;
    if (farFromInk(ink, group.x - x, group.y - y, border + group.radius)) continue;
    for (const v of group.corners) {
      if (outsideBox(ink.box, v.x - x, v.y - y) >= border) continue;
      const clear = -inkDistance(ink, v.x - x, v.y - y);
      // Swallowed by ink: part of the edge runs inside it, and what is outside there is deeper than nothing.
      border = Math.min(border, clear > 0 ? clear : -DEPTH_EPS_MM);
    }
  }
  for (const pole of area.poles) if (-pole.depthMm < border && inkDistance(ink, pole.x - x, pole.y - y) > 0) border = -pole.depthMm;
  return border;
}

/** Above 0 in ink. The point is relative to the artwork's centre; it is turned back into the unturned artwork. */
export function inkDistance(ink: TurnedInk, px: number, py: number): number {
  const p = unturned(ink, px, py);
  return ink.field.signed(p.x, p.y);
}

/** In the unturned artwork's coordinates. */
export function unturned(ink: TurnedInk, px: number, py: number): Point {
  return { x: ink.cos * px + ink.sin * py, y: ink.cos * py - ink.sin * px };
}

/** No ink within `reach` of the point: by the box where that is enough, else by the ink itself. */
export function farFromInk(ink: TurnedInk, px: number, py: number, reach: number): boolean {
  return outsideBox(ink.box, px, py) >= reach || -inkDistance(ink, px, py) >= reach;
}

export function outsideBox(box: Box, x: number, y: number): number {
  const dx = Math.max(box.x - x, 0, x - box.x - box.w), dy = Math.max(box.y - y, 0, y - box.y - box.h);
  return Math.hypot(dx, dy);
}

/** Lowest signed distance along an ink edge from a to b where that is below 0 and below `soFar`; or any value below `below`. */
function lowestOnEdge(field: DistanceField, ax: number, ay: number, atA: number, bx: number, by: number, atB: number, soFar: number, below: number): number {
  if (soFar < below) return soFar;
  const length = Math.hypot(bx - ax, by - ay);
  // The signed distance changes by no more than the way gone.
  if ((atA + atB - length) / 2 >= Math.min(soFar, 0) - DEPTH_EPS_MM) return soFar;
  const candidates = field.candidates(ax, ay);
  if (atA > 0 && atB > 0) {
    // Both ends asked of the same cell: it knows every edge that this one could cross.
    if (candidates === field.candidates(bx, by) && !crossesAny(field, candidates, ax, ay, bx, by)) return soFar;
  } else if (-deepestPossible(field, candidates, ax, ay, bx, by) >= soFar - DEPTH_EPS_MM) return soFar;
  if (length < DEPTH_EPS_MM) return soFar;
  const mx = (ax + bx) / 2, my = (ay + by) / 2, atM = field.signed(mx, my);
  const lower = lowestOnEdge(field, ax, ay, atA, mx, my, atM, Math.min(soFar, atM), below);
  return lowestOnEdge(field, mx, my, atM, bx, by, atB, lower, below);
}

/** The distance to one fixed edge is convex, so along a way it is largest at an end; the distance to the area is no larger. */
function deepestPossible(field: DistanceField, candidates: Int32Array, ax: number, ay: number, bx: number, by: number): number {
  let least = Infinity;
  for (let k = 0; k < candidates.length; k++) {
    const e = candidates[k];
    least = Math.min(least, Math.max(field.distSq(e, ax, ay), field.distSq(e, bx, by)));
  }
  return Math.sqrt(least);
}

function crossesAny(field: DistanceField, candidates: Int32Array, ax: number, ay: number, bx: number, by: number): boolean {
  const ux = bx - ax, uy = by - ay;
  for (let k = 0; k < candidates.length; k++) {
    const e = candidates[k];
    const vx = field.dx[e], vy = field.dy[e], wx = field.ax[e] - ax, wy = field.ay[e] - ay;
    const denominator = ux * vy - uy * vx;
    if (denominator === 0) continue;
    const t = (wx * vy - wy * vx) / denominator, s = (wx * uy - wy * ux) / denominator;
    if (t >= 0 && t <= 1 && s >= 0 && s <= 1) return true;
  }
  return false;
}
