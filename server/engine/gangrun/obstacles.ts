/**
 * What one place forbids to another: convex rings about it in which the other's (x, y) must not lie, or come nearer than a
 * distance. Labels, bodies, inks and turned impressions all become such rings, so that a search only asks whether a point is
 * clear of them.
 *
 * For a place b at p and one a that stands at q: at turn 0 its label must keep away from a's, so p − q stays out of the no-fit
 * polygon. Turned impressions of b meet a just as b meets a's impressions turned the other way, so those are put up as further
 * obstacles. A place meets its own impression where (R − 1)(p − c) lies in the no-fit polygon: R − 1 turns and scales, so the
 * forbidden ring is that polygon turned back, scaled, about the sheet's middle c. All in bed coordinates, mm.
 */
import { growConvex, noFitPolygon } from '../geometry/convex.ts';
import { ringBox } from '../geometry/ring.ts';
import { rotatePoint, sinCos } from '../geometry/transform.ts';
import type { Box, Point, Ring } from '../geometry/types.ts';
import { kindClearance } from './kinds.ts';
import type { Pose } from './kinds.ts';
import { boxRing } from './layout.ts';
import type { OrderShapes } from './place-geometry.ts';
import { impressionAngle, impressionPlace } from './sheet-frame.ts';
import type { SheetFrame } from './sheet-frame.ts';
import type { Setup } from './types.ts';

export interface Obstacle {
  ring: Ring;
  /** Points nearer than this to the ring are forbidden too. */
  reachMm: number;
  /** Around the forbidden area; its corners and the crossings of its edges are where a place can touch. */
  outer: Ring;
  /** Of `outer`. */
  box: Box;
}

export interface ObstacleMaker {
  /** About a place of `standing` at the origin, for one of `coming`; still to be moved to where it stands. */
  between(standing: Pose, coming: Pose): { turn: number; obstacle: Obstacle }[];
  /** Where a pose meets its own turned impressions. */
  own(pose: Pose): Obstacle[];
  /** Keep-outs, for one pose. */
  fixed(pose: Pose): Obstacle[];
}

export function obstacleMaker(shapes: OrderShapes, frame: SheetFrame, turns: Setup['turns'], airMm = 0): ObstacleMaker {
  const { order } = shapes;
  const gap = order.gapMm + airMm;
  const turnGap = gap + order.turnToleranceMm;
  const known = new Map<number, { turn: number; obstacle: Obstacle }[]>();
  const ownKnown = new Map<number, Obstacle[]>();

  function make(standing: Pose, coming: Pose): { turn: number; obstacle: Obstacle }[] {
    const list: { turn: number; obstacle: Obstacle }[] = [];
    const put = (turn: number, a: Ring, b: Ring, reach: number) => list.push({ turn, obstacle: obstacle(noFitPolygon(a, b), reach) });
    for (const a of standing.labels) for (const b of coming.labels) put(0, a, b, gap);
    for (const a of standing.bodies) for (const b of coming.bodies) put(0, a.hull, b.hull, a.trimMm + b.trimMm);
    const clear = kindClearance(shapes, standing.kind, coming.kind);
    if (clear > 0) put(0, standing.ink, coming.ink, clear);
    for (let turn = 1; turn < turns; turn++) {
      const angle = impressionAngle(turn, turns);
      for (const a of standing.labels) {
        const turned = a.map((p) => rotatePoint(p, angle));
        for (const b of coming.labels) put(turn, turned, b, turnGap);
      }
    }
    return list;
  }

  function makeOwn(pose: Pose): Obstacle[] {
    const list: Obstacle[] = [];
    for (let turn = 1; turn <= turns / 2; turn++) {
      const angle = impressionAngle(turn, turns);
      const back = turnLessOne(angle);
      for (const a of pose.shape.labels) {
        for (const b of pose.shape.labels) {
          const forbidden = noFitPolygon(a, b.map((p) => rotatePoint(p, angle))).map((q) => {
            const p = back.apply(q);
            return { x: frame.centre.x + p.x, y: frame.centre.y + p.y };
          });
          list.push(obstacle(forbidden, turnGap * back.scale));
        }
      }
    }
    return list;
  }

  return {
    between(standing, coming) {
      const key = standing.id * 65536 + coming.id;
      let list = known.get(key);
      if (!list) known.set(key, (list = make(standing, coming)));
      return list;
    },
    own(pose) {
      let list = ownKnown.get(pose.id);
      if (!list) ownKnown.set(pose.id, (list = makeOwn(pose)));
      return list;
    },
    fixed: (pose) => order.platform.keepOuts.flatMap((box) => pose.bodies.map((body) => obstacle(noFitPolygon(boxRing(box), body.hull), body.trimMm))),
  };
}

/** Inverse of R(angle) − 1 for an angle other than 0: a turn and a scale. */
function turnLessOne(angleDeg: number): { apply(p: Point): Point; scale: number } {
  const { sin, cos } = sinCos(angleDeg);
  const a = cos - 1, det = a * a + sin * sin;
  return { scale: 1 / Math.sqrt(det), apply: ({ x, y }) => ({ x: (a * x + sin * y) / det, y: (a * y - sin * x) / det }) };
}

function obstacle(ring: Ring, reachMm: number): Obstacle {
  const outer = growConvex(ring, reachMm);
  return { ring, reachMm, outer, box: ringBox(outer) };
}

/** An obstacle about the origin, put where the place or its impression stands. */
export function moveObstacle({ ring, reachMm, outer, box }: Obstacle, by: Point): Obstacle {
  const move = (p: Point) => ({ x: p.x + by.x, y: p.y + by.y });
  return { ring: ring.map(move), reachMm, outer: outer.map(move), box: { x: box.x + by.x, y: box.y + by.y, w: box.w, h: box.h } };
}

export function obstaclesOf(maker: ObstacleMaker, standing: Pose, at: Point, coming: Pose, turns: Setup['turns'], frame: SheetFrame): Obstacle[] {
  return maker.between(standing, coming).map(({ turn, obstacle: about }) => moveObstacle(about, impressionPlace(at, turn, turns, frame.centre)));
}
