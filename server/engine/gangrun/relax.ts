/**
 * Places pushed apart until they all stand free: finds what setting one after the other cannot, such as circles that hold each
 * other in the middle.
 *
 * From a random start every place is moved out of the obstacles that the others put up, each by half of what is missing, over
 * and over (the overlap minimisation of T. Imamichi, M. Yagiura and H. Nagamochi, Discrete Optimization 6, 2009, by plain steps).
 * Output: where all stand, or null. Every look at an obstacle counts as a share of a step of effort.
 */
import type { Point, Ring } from '../geometry/types.ts';
import type { Kind } from './kinds.ts';
import { isFree, regionOf } from './packing.ts';
import type { PackingSpace, Placed } from './packing.ts';
import { obstaclesOf } from './obstacles.ts';
import type { Obstacle } from './obstacles.ts';

/** Sweeps of one start; what has not settled by then rarely does. */
const SWEEPS = 160;
/** Aimed at beyond what is asked, so that the last sweep ends free, mm. */
const BEYOND_MM = 0.004;
/** Share of a missing distance that one of the two moves. */
const SHARE = 0.55;
/** Testing an obstacle here costs about a tenth of finding a corner's place. */
const LOOKS_A_STEP = 10;

export function relax(space: PackingSpace, kinds: readonly Kind[], next: () => number): Placed[] | null {
  if (space.cells.length !== 1) return null;
  const places: Placed[] = [];
  for (const kind of kinds) {
    const pose = kind.poses[Math.floor(next() * kind.poses.length)];
    const region = regionOf(pose, space.cells[0], space.frame);
    if (!region) return null;
    places.push({ pose, x: region.x + next() * region.w, y: region.y + next() * region.h });
  }
  const regions = places.map(({ pose }) => regionOf(pose, space.cells[0], space.frame)!);
  for (let sweep = 0; sweep < SWEEPS && !space.budget.stopped(); sweep++) {
    let moved = false;
    places.forEach((place, i) => {
      let dx = 0, dy = 0;
      for (const obstacle of around(space, places, i)) {
        const push = pushOut(obstacle, place);
        if (!push) continue;
        moved = true;
        dx += push.x * SHARE;
        dy += push.y * SHARE;
      }
      const region = regions[i];
      place.x = Math.min(Math.max(place.x + dx, region.x), region.x + region.w);
      place.y = Math.min(Math.max(place.y + dy, region.y), region.y + region.h);
    });
    if (!moved) return places.every((place, i) => isFree(around(space, places, i), place)) ? places : null;
  }
  return places.every((place, i) => isFree(around(space, places, i), place)) ? places : null;
}

function around(space: PackingSpace, places: readonly Placed[], i: number): Obstacle[] {
  const { pose } = places[i];
  const list = [...space.maker.fixed(pose), ...space.maker.own(pose), ...places.flatMap((other, k) => (k === i ? [] : obstaclesOf(space.maker, other.pose, other, pose, space.turns, space.frame)))];
  space.budget.left -= list.length / LOOKS_A_STEP;
  return list;
}

/** The shortest way out of an obstacle, or null where the point is clear of it. */
function pushOut({ ring, reachMm, box }: Obstacle, p: Point): Point | null {
  if (p.x <= box.x || p.y <= box.y || p.x >= box.x + box.w || p.y >= box.y + box.h) return null;
  const { out, normal } = deepestEdge(ring, p);
  const missing = reachMm + BEYOND_MM - out;
  return missing > 0 ? { x: normal.x * missing, y: normal.y * missing } : null;
}

/** The edge whose line is farthest out, as seen from p; beyond a corner that is a little less than the true distance, which only pushes a little far. */
function deepestEdge(ring: Ring, p: Point): { out: number; normal: Point } {
  let out = -Infinity, normal = { x: 1, y: 0 };
  for (let i = 0; i < ring.length; i++) {
    const a = ring[i], b = ring[i + 1 === ring.length ? 0 : i + 1];
    const ex = b.x - a.x, ey = b.y - a.y, length = Math.hypot(ex, ey);
    if (length === 0) continue;
    const d = ((p.x - a.x) * ey - (p.y - a.y) * ex) / length;
    if (d > out) [out, normal] = [d, { x: ey / length, y: -ex / length }];
  }
  return { out, normal };
}
