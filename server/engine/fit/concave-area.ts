/**
 * What a fit needs of a usable area that is not convex, worked out once for each die: the distance field of its edge, the corners
 * that point into it (reflex corners: only they can be the nearest place of the edge to the middle of an ink's edge), and the poles
 * outside it: places that are farther from the area than everything round them, as the middle of a hole is.
 * Input and output mm, in the die's coordinates. Cost: a grid of 48 × 48 questions to the field. Nothing is mutated.
 */
import { DistanceField } from '../geometry/distance-field.ts';
import { boxCentre, outlineBox, ringBox, ringInside, signedArea } from '../geometry/ring.ts';
import type { Box, Outline, Point, Ring } from '../geometry/types.ts';

export interface ConcaveArea {
  field: DistanceField;
  reflex: ReflexGroup[];
  poles: (Point & { depthMm: number })[];
}

/** Neighbouring reflex corners, as those of one arc, with a circle round them: most groups are told apart from the ink as a whole. */
export interface ReflexGroup { x: number; y: number; radius: number; corners: Point[] }

export function prepareConcaveArea(area: Outline): ConcaveArea {
  const field = new DistanceField(area);
  return { field, reflex: reflexGroups(area), poles: outsidePoles(field) };
}

/** A corner that turns back by less than this, as the sine of its angle, is straight. */
const STRAIGHT_SINE = 1e-9;

/** Few enough to look at each, enough that there are few groups. */
const GROUP_CORNERS = 12;
/** Corners farther apart than this share of the area's size are not neighbours. */
const GROUP_SHARE = 0.05;

function reflexGroups(area: Outline): ReflexGroup[] {
  const { w, h } = outlineBox(area);
  const nearMm = Math.max(w, h) * GROUP_SHARE;
  const groups: Point[][] = [];
  for (const corner of reflexCorners(area)) {
    const group = groups.at(-1);
    if (group && group.length < GROUP_CORNERS && Math.hypot(group[0].x - corner.x, group[0].y - corner.y) < nearMm) group.push(corner);
    else groups.push([corner]);
  }
  return groups.map((corners) => {
    const centre = boxCentre(ringBox(corners));
    return { ...centre, radius: Math.max(...corners.map((c) => Math.hypot(c.x - centre.x, c.y - centre.y))), corners };
  });
}

function reflexCorners(area: Outline): Point[] {
  return area.rings.flatMap((ring, i) => {
    const depth = area.rings.filter((other, j) => j !== i && ringInside(ring, other)).length;
    // Run the ring so that the area lies to the right of each edge: outer rings clockwise, holes the other way.
    const clockwise = signedArea(ring) > 0;
    const oriented: Ring = clockwise === (depth % 2 === 0) ? ring : [...ring].reverse();
    return oriented.filter((b, k) => {
      const a = oriented[(k + oriented.length - 1) % oriented.length], c = oriented[(k + 1) % oriented.length];
      const ux = b.x - a.x, uy = b.y - a.y, vx = c.x - b.x, vy = c.y - b.y;
      return ux * vy - uy * vx < -STRAIGHT_SINE * Math.hypot(ux, uy) * Math.hypot(vx, vy);
    });
  });
}

const POLE_GRID = 48;
/** Poles are walked to within this. */
const POLE_MM = 1e-4;

/** Local maxima of the distance outside: found on a grid over the box, then walked to the top by halving steps. */
function outsidePoles(field: DistanceField): ConcaveArea['poles'] {
  const { box } = field;
  const stepX = box.w / POLE_GRID, stepY = box.h / POLE_GRID;
  const outside = (x: number, y: number): number => -field.signed(x, y);
  const values: number[][] = [];
  for (let j = 0; j <= POLE_GRID; j++) values.push(Array.from({ length: POLE_GRID + 1 }, (_, i) => outside(box.x + i * stepX, box.y + j * stepY)));
  const poles: ConcaveArea['poles'] = [];
  // On the box's own edge the distance still grows outwards: no pole.
  for (let j = 1; j < POLE_GRID; j++) {
    for (let i = 1; i < POLE_GRID; i++) {
      const here = values[j][i];
      if (here <= 0) continue;
      const top = [-1, 0, 1].every((dj) => [-1, 0, 1].every((di) => values[j + dj][i + di] <= here));
      if (!top) continue;
      const pole = walkUp(outside, { x: box.x + i * stepX, y: box.y + j * stepY }, Math.max(stepX, stepY), box);
      if (pole !== null && !poles.some((p) => Math.hypot(p.x - pole.x, p.y - pole.y) < 10 * POLE_MM)) poles.push(pole);
    }
  }
  return poles;
}

/** A gain that is a smaller share of the step is none. */
const WORTH_WALKING = 0.01;
const DIRECTIONS = Array.from({ length: 8 }, (_, k) => ({ x: Math.cos((k * Math.PI) / 4), y: Math.sin((k * Math.PI) / 4) }));

/** Null where the way up leads out of the box: the far outside, where it never ends. */
function walkUp(height: (x: number, y: number) => number, start: Point, firstStep: number, box: Box): (Point & { depthMm: number }) | null {
  let { x, y } = start, depthMm = height(x, y);
  for (let step = firstStep; step > POLE_MM;) {
    if (x <= box.x || y <= box.y || x >= box.x + box.w || y >= box.y + box.h) return null;
    const next = DIRECTIONS.map((d) => ({ x: x + d.x * step, y: y + d.y * step })).find((p) => height(p.x, p.y) > depthMm + step * WORTH_WALKING);
    if (next) ({ x, y } = next);
    else step /= 2;
    depthMm = height(x, y);
  }
  return { x, y, depthMm };
}
