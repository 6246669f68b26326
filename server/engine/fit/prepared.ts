/**
 * What a fit needs of a die and of an artwork, worked out once and used for every pair of a fit table. Lengths mm; a die's
 * coordinates are those of its cut line's box, an artwork's are relative to the centre of its (unturned) box.
 * Bad artwork (no points, no numbers) throws and says which. Nothing is mutated.
 */
import { DistanceField } from '../geometry/distance-field.ts';
import { outlineHull } from '../geometry/hull.ts';
import { isConvexRing } from '../geometry/offset.ts';
import { boxCentre, outlineArea, outlineBox, ringBox } from '../geometry/ring.ts';
import { rotatePoint } from '../geometry/transform.ts';
import type { Box, Outline, Point, Ring } from '../geometry/types.ts';
import { prepareConcaveArea, type ConcaveArea } from './concave-area.ts';
import { dieOutline, usableOutline } from './die-outline.ts';
import { buildInkTree, type InkTree } from './ink-tree.ts';
import type { DieGeometry } from './types.ts';

/** Edges of a convex ring as half-planes n·p ≤ limit, n pointing outwards, in the order of their angle. */
export interface HalfPlanes { nx: Float64Array; ny: Float64Array; limit: Float64Array; count: number }

export interface PreparedDie {
  cut: Outline;
  cutAreaMm2: number;
  /** Where ink may stand; the cut line itself where the stitch line leaves nothing. */
  area: Outline;
  areaBox: Box;
  /** Hull of the area. */
  halfPlanes: HalfPlanes;
  /** Null where the area is convex: the half-planes are the area then. */
  concave: ConcaveArea | null;
  /** Added to every border: minus the inset where it leaves nothing, else 0. */
  shiftMm: number;
  /** The stitch line leaves nothing: no ink fits, whatever the border says. */
  nothingUsable: boolean;
}

export function prepareDie(die: DieGeometry): PreparedDie {
  const cut = dieOutline(die);
  const usable = usableOutline(die);
  const nothingUsable = usable.rings.length === 0;
  // Every place is less than the inset away from the cut line, so the border to the cut line less the inset is below 0 and grows
  // to 0 as the inset shrinks: the figure a person expects beside "does not fit".
  const area = nothingUsable ? cut : usable;
  const hull = outlineHull(area);
  const convex = area.rings.length === 1 && isConvexRing(area.rings[0]);
  return {
    cut, cutAreaMm2: outlineArea(cut), area, areaBox: outlineBox(area), halfPlanes: halfPlanesOf(hull),
    concave: convex ? null : prepareConcaveArea(area),
    shiftMm: nothingUsable ? -(die.stitchInsetMm ?? 0) : 0, nothingUsable,
  };
}

function halfPlanesOf(hull: Ring): HalfPlanes {
  const n = hull.length;
  const planes: HalfPlanes = { nx: new Float64Array(n), ny: new Float64Array(n), limit: new Float64Array(n), count: n };
  hull.forEach((a, i) => {
    const b = hull[(i + 1) % n];
    const length = Math.hypot(b.x - a.x, b.y - a.y);
    planes.nx[i] = (b.y - a.y) / length;
    planes.ny[i] = -(b.x - a.x) / length;
    planes.limit[i] = planes.nx[i] * a.x + planes.ny[i] * a.y;
  });
  return planes;
}

export interface PreparedArtwork {
  /** Relative to the centre of the box. */
  rings: Ring[];
  hull: Ring;
  /** Middle of the smallest circle found round all ink, and its radius: how far a turn about it can move ink. */
  pivot: Point;
  swingMm: number;
  /** Only for areas that are not convex; worked out when first asked for. */
  ink(): Ink;
}
export interface Ink { tree: InkTree; field: DistanceField; /** Of the long edges alone; null where there are none. */ longEdges: DistanceField | null }
/** An edge this short is as good as its ends: a corner 3 mm away is nearer to its middle than to an end by 0.02 mm at most. */
const SHORT_EDGE_MM = 0.7;

export function prepareArtwork(artwork: Outline): PreparedArtwork {
  const points = artwork.rings.flat();
  if (points.length === 0) throw new RangeError('An artwork without points cannot be placed.');
  const bad = points.find((p) => !Number.isFinite(p.x) || !Number.isFinite(p.y));
  if (bad) throw new RangeError(`An artwork has a point that is no number: ${bad.x}, ${bad.y}.`);
  const centre = boxCentre(outlineBox(artwork));
  const rings = artwork.rings.filter((ring) => ring.length > 0).map((ring) => ring.map((p) => ({ x: p.x - centre.x, y: p.y - centre.y })));
  const hull = outlineHull({ rings });
  let ink: Ink | undefined;
  return { rings, hull, ...swing(hull), ink: () => (ink ??= prepareInk(rings)) };
}

function prepareInk(rings: Ring[]): Ink {
  const long = rings.flatMap((ring) => ring.map((a, i) => [a, ring[(i + 1) % ring.length]])).filter(([a, b]) => Math.hypot(a.x - b.x, a.y - b.y) > SHORT_EDGE_MM);
  return { tree: buildInkTree(rings), field: new DistanceField({ rings }), longEdges: long.length > 0 ? new DistanceField({ rings: long }) : null };
}

/**
 * Radius of a circle round all points that is nearly the smallest: steps towards the farthest point, each shorter (M. Bădoiu,
 * K. L. Clarkson, "Smaller core-sets for balls", SODA 2003). Any centre gives a valid bound; a better one only a tighter one.
 */
function swing(hull: Ring): { pivot: Point; swingMm: number } {
  let c: Point = { x: 0, y: 0 }, pivot = c, swingMm = Infinity;
  for (let i = 1; i <= 40; i++) {
    let far = hull[0], farSq = -1;
    for (const p of hull) {
      const distSq = (p.x - c.x) ** 2 + (p.y - c.y) ** 2;
      if (distSq > farSq) { farSq = distSq; far = p; }
    }
    if (farSq < swingMm * swingMm) { swingMm = Math.sqrt(farSq); pivot = c; }
    c = { x: c.x + (far.x - c.x) / (i + 1), y: c.y + (far.y - c.y) / (i + 1) };
  }
  return { pivot, swingMm };
}

export interface TurnedArtwork {
  angleDeg: number;
  hull: Ring;
  /** Of the turned ink, relative to the centre it is turned about. */
  box: Box;
}

export function turnArtwork(artwork: PreparedArtwork, angleDeg: number): TurnedArtwork {
  if (!Number.isFinite(angleDeg)) throw new RangeError(`A turn must be a finite angle, not ${angleDeg}.`);
  const hull = artwork.hull.map((p) => rotatePoint(p, angleDeg));
  return { angleDeg, hull, box: ringBox(hull) };
}

/** Where the artwork's centre would come to lie if its turned box stood in the middle of the area's box: equal margins both ways. */
export function centredTarget(die: PreparedDie, artwork: TurnedArtwork): Point {
  const area = boxCentre(die.areaBox), ink = boxCentre(artwork.box);
  return { x: area.x - ink.x, y: area.y - ink.y };
}
