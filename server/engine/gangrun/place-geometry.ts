/**
 * The shapes that a place on the bed brings with it: the hulls of its ink, its stamps' bodies and its lines' cut lines.
 *
 * The ink stands, each line's die lies around it. Shapes of a place are relative to its (x, y), the middle of the first stamp's
 * ink box, at a given turn of that stamp; moving the place moves them all. Hulls are convex, clockwise as seen on the page.
 * Prepared once an order; nothing of the order is mutated. A line whose stamp or die is not in the order throws: the caller
 * sorts those out first (see unplaced.ts).
 */
import { dieOutline } from '../fit/die-outline.ts';
import { translateRing } from '../geometry/convex.ts';
import { convexHull, outlineHull } from '../geometry/hull.ts';
import { boxCentre, outlineArea, outlineBox } from '../geometry/ring.ts';
import { rotatePoint } from '../geometry/transform.ts';
import type { Point, Ring } from '../geometry/types.ts';
import type { Placement, RunLine, RunOrder } from './types.ts';

/** Ink of lines that share a place coincides within this, mm. */
export const SAME_INK_MM = 0.05;

export interface PlaceShape {
  /** Turn of the first stamp. */
  rotationDeg: number;
  /** Hull of each line's cut line, in the order of the lines. */
  labels: Ring[];
  /** Of each stamp: hull of its ink, and how far the body reaches beyond it. */
  bodies: { hull: Ring; trimMm: number }[];
  /** Hull of all ink. */
  ink: Ring;
}

export interface OrderShapes {
  order: RunOrder;
  line(id: string): RunLine;
  /** Hull of a line's cut line in the box of the cut line. */
  dieHull(dieId: string): Ring;
  /** Area of the cut line itself, mm². */
  dieAreaMm2(dieId: string): number;
  rimMm(dieId: string): number;
  /** Hull of the ink about the middle of its box. */
  inkHull(stampId: string): Ring;
  stamp(id: string): RunOrder['stamps'][number];
  clearMm(inkId: string): number;
}

export function orderShapes(order: RunOrder): OrderShapes {
  const lines = byId(order.lines), stamps = byId(order.stamps), dies = byId(order.dies), inks = byId(order.inks);
  const outline = cached((id: string) => dieOutline(found(dies, id, 'die').geometry));
  const dieHull = cached((id: string) => outlineHull(outline(id)));
  const area = cached((id: string) => outlineArea(outline(id)));
  const inkHull = cached((id: string) => {
    const { artwork } = found(stamps, id, 'stamp');
    const { x, y } = boxCentre(outlineBox(artwork));
    return translateRing(outlineHull(artwork), -x, -y);
  });
  return {
    order, dieHull, inkHull, dieAreaMm2: area,
    line: (id) => found(lines, id, 'line'),
    stamp: (id) => found(stamps, id, 'stamp'),
    rimMm: (id) => found(dies, id, 'die').geometry.rimMm ?? 0,
    clearMm: (id) => inks.get(id)?.clearMm ?? 0,
  };
}

/** The place of lines that share it, the first stamp turned by rotationDeg. */
export function placeShape(shapes: OrderShapes, lines: readonly RunLine[], rotationDeg: number): PlaceShape {
  const bodies = pieceHulls(shapes, lines[0], rotationDeg).map((hull, i) => ({ hull, trimMm: shapes.stamp(lines[0].pieces[i].stampId).trimMm }));
  return {
    rotationDeg,
    labels: lines.map((line) => labelHull(shapes, line, rotationDeg)),
    bodies,
    ink: bodies.length === 1 ? bodies[0].hull : convexHull(bodies.flatMap((body) => body.hull)),
  };
}

export function labelAngle(line: RunLine, rotationDeg: number): number {
  return rotationDeg - line.pieces[0].rotationDeg;
}

/** Of a point of the cut line's box, relative to the place. */
export function fromLabel(line: RunLine, rotationDeg: number, q: Point): Point {
  const { centre } = line.pieces[0];
  return rotatePoint({ x: q.x - centre.x, y: q.y - centre.y }, labelAngle(line, rotationDeg));
}

function labelHull(shapes: OrderShapes, line: RunLine, rotationDeg: number): Ring {
  return shapes.dieHull(line.dieId).map((q) => fromLabel(line, rotationDeg, q));
}

/** Hull of each piece's ink, relative to the place. */
export function pieceHulls(shapes: OrderShapes, line: RunLine, rotationDeg: number): Ring[] {
  const angle = labelAngle(line, rotationDeg);
  return line.pieces.map((piece) => {
    const at = fromLabel(line, rotationDeg, piece.centre);
    return shapes.inkHull(piece.stampId).map((p) => {
      const turned = rotatePoint(p, angle + piece.rotationDeg);
      return { x: turned.x + at.x, y: turned.y + at.y };
    });
  });
}

export function shapeOfPlacement(shapes: OrderShapes, placement: Placement): PlaceShape {
  return placeShape(shapes, placement.lineIds.map(shapes.line), placement.rotationDeg);
}

/** Inks of all lines of some places, and the room that their pads need where they are more than one. */
export function clearanceOf(shapes: OrderShapes, ...lines: (readonly RunLine[])[]): number {
  const inks = new Set(lines.flatMap((some) => some.flatMap((line) => line.pieces.map((piece) => piece.inkId))));
  return inks.size < 2 ? 0 : Math.max(...[...inks].map(shapes.clearMm));
}

/** Whether b's ink lies where a's does when both have the same first stamp at the same turn. */
export function sameInk(shapes: OrderShapes, a: RunLine, b: RunLine): boolean {
  if (a.pieces.length !== b.pieces.length || a.pieces.some((piece, i) => piece.stampId !== b.pieces[i].stampId)) return false;
  const p = pieceHulls(shapes, a, 0), q = pieceHulls(shapes, b, 0);
  return p.every((hull, i) => hull.every((corner, k) => Math.hypot(corner.x - q[i][k].x, corner.y - q[i][k].y) <= SAME_INK_MM));
}

function byId<T extends { id: string }>(rows: readonly T[]): Map<string, T> {
  return new Map(rows.map((row) => [row.id, row]));
}

function found<T>(rows: Map<string, T>, id: string, what: string): T {
  const row = rows.get(id);
  if (row === undefined) throw new RangeError(`The order has no ${what} ${JSON.stringify(id)}.`);
  return row;
}

function cached<T>(make: (id: string) => T): (id: string) => T {
  const known = new Map<string, T>();
  return (id) => {
    let value = known.get(id);
    if (value === undefined) known.set(id, (value = make(id)));
    return value;
  };
}
