/**
 * Puts places on the bed one after the other, each where it touches what stands: the constructive half of the search.
 *
 * Input: places to set in a given order, a rule for what is best, obstacles. Output: where each stands, or those that found no
 * place. A place goes to a corner of its free area: a corner of an obstacle's outline, a crossing of two, or of one with the
 * edge of its region; of these the one first in the direction of packing. Cost: for n obstacles with k corners, the
 * crossings of those whose boxes meet, each held against all obstacles; every such test counts as one step of effort.
 */
import { distanceToConvex } from '../geometry/convex.ts';
import type { Box, Point } from '../geometry/types.ts';
import type { Kind, Pose } from './kinds.ts';
import { obstaclesOf } from './obstacles.ts';
import type { Obstacle, ObstacleMaker } from './obstacles.ts';
import type { SheetFrame } from './sheet-frame.ts';
import type { Placement, RunOrder, Setup } from './types.ts';

export interface Placed { pose: Pose; x: number; y: number; /** Kept as it is. */ pin?: Placement }

export interface PackingSpace {
  frame: SheetFrame;
  turns: Setup['turns'];
  maker: ObstacleMaker;
  stamps: RunOrder['stamps'];
  /** Parts of the sheet's inner area that no label may leave; one where no strips are cut. */
  cells: Box[];
  budget: StepBudget;
}

/** Effort in steps, so that the same order takes the same way on every machine. */
export interface StepBudget { left: number; stopped(): boolean }

/** Order of preference: the label's far edge along (x, y), counted from the registration corner's side. */
export interface Direction { x: number; y: number; fromRight: boolean; fromBottom: boolean }

/** A touch is no overlap: rounding of crossings, mm. Far below what counts as a fault. */
const TOUCH_MM = 1e-6;

/** Finding a corner costs about this share of testing one. */
const CORNERS_A_STEP = 8;

/** Area in which a pose's (x, y) keeps labels in the cell and ink where it may be; null where there is none. */
export function regionOf(pose: Pose, cell: Box, frame: SheetFrame): Box | null {
  const x = range([[pose.labelBox.x, pose.labelBox.w, cell.x, cell.w], [pose.inkBox.x, pose.inkBox.w, frame.ink.x, frame.ink.w]]);
  const y = range([[pose.labelBox.y, pose.labelBox.h, cell.y, cell.h], [pose.inkBox.y, pose.inkBox.h, frame.ink.y, frame.ink.h]]);
  return x && y ? { x: x[0], y: y[0], w: x[1] - x[0], h: y[1] - y[0] } : null;
}

function range(bounds: [number, number, number, number][]): [number, number] | null {
  let from = -Infinity, to = Infinity;
  for (const [start, size, outer, length] of bounds) {
    from = Math.max(from, outer - start);
    to = Math.min(to, outer + length - start - size);
  }
  if (to < from - TOUCH_MM) return null;
  return to < from ? [(from + to) / 2, (from + to) / 2] : [from, to];
}

/** Sets the kinds in turn beside those that stand; those without a place are left over. */
export function packInOrder(space: PackingSpace, standing: readonly Placed[], kinds: readonly Kind[], direction: Direction): { placed: Placed[]; left: Kind[] } {
  const placed = [...standing];
  const left: Kind[] = [];
  const roomMm2 = space.frame.inner.w * space.frame.inner.h;
  const areaOf = (some: Placed[]) => some.reduce((sum, { pose }) => sum + pose.leastAreaMm2 * space.turns, 0);
  for (const kind of kinds) {
    const full = areaOf(placed) + kind.poses[0].leastAreaMm2 * space.turns > roomMm2;
    const next = full || space.budget.stopped() ? null : bestPlace(space, placed, kind, direction);
    if (next) placed.push(next);
    else left.push(kind);
  }
  return { placed, left };
}

export function bestPlace(space: PackingSpace, placed: readonly Placed[], kind: Kind, direction: Direction): Placed | null {
  if (!stampsLeft(space, placed, kind)) return null;
  let best: Placed | null = null;
  let bestCost = Infinity;
  for (const pose of kind.poses) {
    const obstacles = [
      ...space.maker.fixed(pose), ...space.maker.own(pose),
      ...placed.flatMap((other) => obstaclesOf(space.maker, other.pose, other, pose, space.turns, space.frame)),
    ];
    for (const cell of space.cells) {
      const region = regionOf(pose, cell, space.frame);
      if (!region) continue;
      const near = obstacles.filter((o) => boxesMeet(o.box, region));
      const corners = candidates(region, near);
      space.budget.left -= corners.length / CORNERS_A_STEP;
      const spots = corners.map((p) => ({ p, cost: costOf(pose, p, space.frame, direction) })).filter(({ cost }) => cost < bestCost - TOUCH_MM);
      spots.sort((a, b) => a.cost - b.cost);
      for (const { p, cost } of spots) {
        space.budget.left--;
        if (!isFree(near, p)) continue;
        best = { pose, x: p.x, y: p.y };
        bestCost = cost;
        break;
      }
    }
  }
  return best;
}

/** A stamp stands at one place at a time, in as many copies as are owned. */
function stampsLeft(space: PackingSpace, placed: readonly Placed[], kind: Kind): boolean {
  return [...kind.stamps].every(([id, needed]) => {
    const used = placed.reduce((n, { pose }) => n + (pose.kind.stamps.get(id) ?? 0), 0);
    return used + needed <= space.stamps.find((stamp) => stamp.id === id)!.owned;
  });
}

function costOf(pose: Pose, p: Point, { sheet }: SheetFrame, d: Direction): number {
  const { labelBox: box } = pose;
  const x = d.fromRight ? sheet.x + sheet.w - p.x - box.x : p.x + box.x + box.w - sheet.x;
  const y = d.fromBottom ? sheet.y + sheet.h - p.y - box.y : p.y + box.y + box.h - sheet.y;
  return d.x * x + d.y * y;
}

export function isFree(obstacles: readonly Obstacle[], { x, y }: Point): boolean {
  for (const o of obstacles) {
    const { box } = o;
    if (x <= box.x || x >= box.x + box.w || y <= box.y || y >= box.y + box.h) continue;
    if (distanceToConvex(o.ring, x, y) < o.reachMm - TOUCH_MM) return false;
  }
  return true;
}

/** Corners of the free area, among others that are not free. */
function candidates(region: Box, obstacles: readonly Obstacle[]): Point[] {
  const { x, y, w, h } = region;
  const right = x + w, bottom = y + h;
  const points: Point[] = [{ x, y }, { x: right, y }, { x, y: bottom }, { x: right, y: bottom }];
  const add = (px: number, py: number) => {
    if (px >= x - TOUCH_MM && px <= right + TOUCH_MM && py >= y - TOUCH_MM && py <= bottom + TOUCH_MM) {
      points.push({ x: Math.min(Math.max(px, x), right), y: Math.min(Math.max(py, y), bottom) });
    }
  };
  obstacles.forEach((o, i) => {
    for (let k = 0; k < o.outer.length; k++) {
      const a = o.outer[k], b = o.outer[(k + 1) % o.outer.length];
      add(a.x, a.y);
      for (const edge of [x, right]) if (a.x < edge !== b.x < edge) add(edge, a.y + ((edge - a.x) * (b.y - a.y)) / (b.x - a.x));
      for (const edge of [y, bottom]) if (a.y < edge !== b.y < edge) add(a.x + ((edge - a.y) * (b.x - a.x)) / (b.y - a.y), edge);
    }
    for (let j = i + 1; j < obstacles.length; j++) if (boxesMeet(o.box, obstacles[j].box)) crossings(o, obstacles[j], add);
  });
  return points;
}

function crossings(a: Obstacle, b: Obstacle, add: (x: number, y: number) => void): void {
  const p = a.outer, q = b.outer, box = b.box;
  for (let i = 0; i < p.length; i++) {
    const p0 = p[i], p1 = p[i + 1 === p.length ? 0 : i + 1];
    if ((p0.x < box.x && p1.x < box.x) || (p0.x > box.x + box.w && p1.x > box.x + box.w) || (p0.y < box.y && p1.y < box.y) || (p0.y > box.y + box.h && p1.y > box.y + box.h)) continue;
    const ux = p1.x - p0.x, uy = p1.y - p0.y;
    for (let k = 0; k < q.length; k++) {
      const q0 = q[k], q1 = q[k + 1 === q.length ? 0 : k + 1];
      const vx = q1.x - q0.x, vy = q1.y - q0.y;
      const cross = ux * vy - uy * vx;
      if (cross === 0) continue;
      const s = ((q0.x - p0.x) * vy - (q0.y - p0.y) * vx) / cross;
      if (s < -1e-9 || s > 1 + 1e-9) continue;
      const t = ((q0.x - p0.x) * uy - (q0.y - p0.y) * ux) / cross;
      if (t >= -1e-9 && t <= 1 + 1e-9) add(p0.x + s * ux, p0.y + s * uy);
    }
  }
}

function boxesMeet(a: Box, b: Box): boolean {
  return a.x <= b.x + b.w && b.x <= a.x + a.w && a.y <= b.y + b.h && b.y <= a.y + a.h;
}
