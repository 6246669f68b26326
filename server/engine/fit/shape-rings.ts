/**
 * Cut lines of the die shapes as rings of points, clockwise as seen on the page, in a box of widthMm × heightMm that starts at
 * 0, 0; a hole follows its outer ring. Straight parts are exact, arcs are points on the true curve (geometry/arc.ts).
 * Sizes are taken as checked (die-shapes.ts); nothing is mutated; cost is one step per point.
 */
import { circleArc, ellipseArc } from '../geometry/arc.ts';
import type { Point, Ring } from '../geometry/types.ts';
import type { DieShape } from './types.ts';

type Shape<K extends DieShape['kind']> = Extract<DieShape, { kind: K }>;
type Drawn = Exclude<DieShape, { kind: 'outline' }>;

const RINGS: { [K in Drawn['kind']]: (shape: Shape<K>) => Ring[] } = {
  rectangle, oval, stadium, scalloped, bracket, notched, tag, banner, hexagon, arch,
};

export function shapeRings(shape: Drawn): Ring[] {
  // The table is typed row by row; that a shape meets its own row is what its kind says.
  const draw = RINGS[shape.kind] as (shape: Drawn) => Ring[];
  return draw(shape).map(withoutRepeats);
}

function rectangle({ widthMm: w, heightMm: h, cornerRadiusMm: r = 0 }: Shape<'rectangle'>): Ring[] {
  if (r === 0) return [[{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }]];
  return [[
    ...circleArc({ x: r, y: r }, r, 180, 90), ...circleArc({ x: w - r, y: r }, r, 270, 90),
    ...circleArc({ x: w - r, y: h - r }, r, 0, 90), ...circleArc({ x: r, y: h - r }, r, 90, 90),
  ]];
}

function oval({ widthMm: w, heightMm: h }: Shape<'oval'>): Ring[] {
  return [ellipseArc({ x: w / 2, y: h / 2 }, w / 2, h / 2, 180, 360)];
}

/** Half circles over the two shorter sides. */
function stadium({ widthMm, heightMm }: Shape<'stadium'>): Ring[] {
  return rectangle({ kind: 'rectangle', widthMm, heightMm, cornerRadiusMm: Math.min(widthMm, heightMm) / 2 });
}

/**
 * The outer edge of equal circles whose centres stand, about scallopMm apart, on a line inside the box. Circles stand on all four
 * crests of the box, so that its size is exact; the pitch gives way to a whole number of scallops and is never wider than asked.
 */
function scalloped(shape: Shape<'scalloped'>): Ring[] {
  const radius = scallopRadius(shape.scallopMm, shape.depthMm);
  const box = { w: shape.widthMm - 2 * radius, h: shape.heightMm - 2 * radius };
  const centres = (shape.base === 'rectangle' ? rectanglePitch(box, shape.scallopMm) : ovalPitch(box, shape.scallopMm)).map((p) => ({ x: p.x + radius, y: p.y + radius }));
  const cusps = centres.map((c, i) => outerCrossing(centres[(i + centres.length - 1) % centres.length], c, radius));
  return [centres.flatMap((c, i) => {
    const from = directionDeg(c, cusps[i]);
    const to = directionDeg(c, cusps[(i + 1) % centres.length]);
    return circleArc(c, radius, from, (to - from + 720) % 360);
  })];
}

/** Radius of the arc over a chord: the intersecting-chords theorem. */
export function scallopRadius(scallopMm: number, depthMm: number): number {
  return (scallopMm ** 2 / 4 + depthMm ** 2) / (2 * depthMm);
}

function rectanglePitch({ w, h }: { w: number; h: number }, pitch: number): Point[] {
  const nx = wholePitches(w, pitch), ny = wholePitches(h, pitch);
  const along = (n: number, at: (t: number) => Point): Point[] => Array.from({ length: n }, (_, i) => at(i / n));
  return [
    ...along(nx, (t) => ({ x: w * t, y: 0 })), ...along(ny, (t) => ({ x: w, y: h * t })),
    ...along(nx, (t) => ({ x: w * (1 - t), y: h })), ...along(ny, (t) => ({ x: 0, y: h * (1 - t) })),
  ];
}

/** One quarter is measured out by length along the curve and mirrored, which puts a circle on each end of both axes. */
function ovalPitch({ w, h }: { w: number; h: number }, pitch: number): Point[] {
  const a = w / 2, b = h / 2;
  const lengths = [0];
  const at = (i: number): Point => ({ x: a * Math.cos((i / QUARTER_STEPS) * (Math.PI / 2)), y: b * Math.sin((i / QUARTER_STEPS) * (Math.PI / 2)) });
  for (let i = 1; i <= QUARTER_STEPS; i++) lengths.push(lengths[i - 1] + Math.hypot(at(i).x - at(i - 1).x, at(i).y - at(i - 1).y));
  const n = wholePitches(lengths[QUARTER_STEPS], pitch);
  const quarter: Point[] = [];
  for (let k = 0, i = 0; k < n; k++) {
    const wanted = (lengths[QUARTER_STEPS] * k) / n;
    while (lengths[i + 1] < wanted) i++;
    quarter.push(at(i + (wanted - lengths[i]) / (lengths[i + 1] - lengths[i])));
  }
  quarter[0] = { x: a, y: 0 };
  const bottomUp = [{ x: 0, y: b }, ...quarter.slice(1).reverse()];
  return [
    ...quarter.map((p) => ({ x: a + p.x, y: b + p.y })), ...bottomUp.map((p) => ({ x: a - p.x, y: b + p.y })),
    ...quarter.map((p) => ({ x: a - p.x, y: b - p.y })), ...bottomUp.map((p) => ({ x: a + p.x, y: b - p.y })),
  ];
}
/** Chords of a quarter oval: their total is short of its true length by less than 1e-6 of it, far below a scallop's share. */
const QUARTER_STEPS = 512;

/** Whole scallops in a length; a hair over a whole number, from rounding, is no further scallop. */
function wholePitches(length: number, pitch: number): number {
  return Math.max(1, Math.ceil(length / pitch - 1e-9));
}

/** Where two equal circles cross, on the outer side of a line that runs clockwise through their centres. */
function outerCrossing(a: Point, b: Point, radius: number): Point {
  const dx = b.x - a.x, dy = b.y - a.y;
  const half = Math.hypot(dx, dy) / 2;
  const rise = Math.sqrt(Math.max(0, radius * radius - half * half));
  return { x: (a.x + b.x) / 2 + (dy / (2 * half)) * rise, y: (a.y + b.y) / 2 - (dx / (2 * half)) * rise };
}

function directionDeg(from: Point, to: Point): number {
  return (Math.atan2(to.y - from.y, to.x - from.x) * 180) / Math.PI;
}

function bracket({ widthMm: w, heightMm: h, radiusMm: r, stepMm: s, corners }: Shape<'bracket'>): Ring[] {
  // Top left corner, going clockwise: from the left side to the top. The others are its mirror images.
  const arc = corners === 'convex' ? circleArc({ x: r + s, y: r + s }, r, 180, 90) : circleArc({ x: s, y: s }, r, 90, -90);
  return [fourCorners([{ x: 0, y: r + s }, ...arc, { x: r + s, y: 0 }], w, h)];
}

function notched(shape: Shape<'notched'>): Ring[] {
  const { widthMm: w, heightMm: h, notchRadiusMm: r } = shape;
  if (shape.at === 'corners') return [fourCorners(circleArc({ x: 0, y: 0 }, r, 90, -90), w, h)];
  return alongTheLonger(w, h, (length, across) => [[
    { x: 0, y: 0 }, { x: length, y: 0 }, ...circleArc({ x: length, y: across / 2 }, r, 270, -180),
    { x: length, y: across }, { x: 0, y: across }, ...circleArc({ x: 0, y: across / 2 }, r, 90, -180),
  ]]);
}

function tag({ widthMm, heightMm, shoulderMm: s, holeMm }: Shape<'tag'>): Ring[] {
  return alongTheLonger(widthMm, heightMm, (length, across) => {
    const outer = [{ x: s, y: 0 }, { x: length, y: 0 }, { x: length, y: across }, { x: s, y: across }, { x: 0, y: across - s }, { x: 0, y: s }];
    if (holeMm === 0) return [outer];
    // Behind the cut-off corners, with at least HOLE_MARGIN_MM of card before it.
    const centre = { x: Math.max(0.75 * s, holeMm / 2 + HOLE_MARGIN_MM), y: across / 2 };
    return [outer, circleArc(centre, holeMm / 2, 0, -360)];
  });
}
/** Less card than this between hole and end tears out. Common practice, no source. */
export const HOLE_MARGIN_MM = 2;

function banner({ widthMm, heightMm, forkMm, ends }: Shape<'banner'>): Ring[] {
  return alongTheLonger(widthMm, heightMm, (length, across) => [[
    { x: 0, y: 0 }, { x: length, y: 0 }, { x: length - forkMm, y: across / 2 }, { x: length, y: across }, { x: 0, y: across },
    ...(ends === 'two' ? [{ x: forkMm, y: across / 2 }] : []),
  ]]);
}

function hexagon({ widthMm: w, heightMm: h, pointMm: p = w / 4 }: Shape<'hexagon'>): Ring[] {
  return [[{ x: 0, y: h / 2 }, { x: p, y: 0 }, { x: w - p, y: 0 }, { x: w, y: h / 2 }, { x: w - p, y: h }, { x: p, y: h }]];
}

function arch({ widthMm: w, heightMm: h, riseMm: rise = Math.min(w / 2, h) }: Shape<'arch'>): Ring[] {
  return [[...ellipseArc({ x: w / 2, y: rise }, w / 2, rise, 180, 180), { x: w, y: h }, { x: 0, y: h }]];
}

/** A top left corner, drawn clockwise, and its mirror images; mirroring turns the direction round, so two of them run backwards. */
function fourCorners(corner: Ring, w: number, h: number): Ring {
  const back = [...corner].reverse();
  return [
    ...corner, ...back.map((p) => ({ x: w - p.x, y: p.y })),
    ...corner.map((p) => ({ x: w - p.x, y: h - p.y })), ...back.map((p) => ({ x: p.x, y: h - p.y })),
  ];
}

/** Draws along x; a shape that is taller than wide is mirrored in the diagonal: left becomes top, right becomes bottom. */
function alongTheLonger(w: number, h: number, draw: (length: number, across: number) => Ring[]): Ring[] {
  if (w >= h) return draw(w, h);
  return draw(h, w).map((ring) => ring.map((p) => ({ x: p.y, y: p.x })).reverse());
}

/** Parts are drawn with both their ends: where two meet, one point is left. */
function withoutRepeats(ring: Ring): Ring {
  return ring.filter((p, i) => {
    const before = ring[(i + ring.length - 1) % ring.length];
    return Math.abs(p.x - before.x) > SAME_POINT_MM || Math.abs(p.y - before.y) > SAME_POINT_MM;
  });
}
/** A millionth of a millimetre: nothing is cut so finely, and rounding in these formulas stays a thousand times below. */
const SAME_POINT_MM = 1e-6;
