/**
 * What a place of a plan looks like on the bed: its labels' cut lines, its stamps' ink and bodies, the ticks that tell where a stamp is
 * level and centred although it hides what it stands on.
 *
 * Output in bed coordinates, mm. The ink stands and each line's die lies around it (see gangrun/types.ts). Prepared once an order; nothing of the order
 * is mutated. A line, stamp or die that the order does not have throws: such a plan belongs to another order. O(points drawn).
 */
import { dieOutline } from '../fit/die-outline.ts';
import { fromLabel, labelAngle } from '../gangrun/place-geometry.ts';
import type { Placement, RunLine, RunOrder } from '../gangrun/types.ts';
import { growConvex } from '../geometry/convex.ts';
import { outlineHull } from '../geometry/hull.ts';
import { boxCentre, outlineBox, ringBox } from '../geometry/ring.ts';
import { mapOutline, rotatePoint, translateOutline } from '../geometry/transform.ts';
import type { Box, Outline, Point, Ring } from '../geometry/types.ts';
import { simplifyRing } from '../reading/simplify.ts';

export interface LabelShape { lineId: string; dieId: string; cut: NonNullable<RunLine['cut']>; outline: Outline }
export interface PieceShape {
  stampId: string;
  copy: number;
  ink: Outline;
  /** To within ROUGH_MM, for pages on which a stamp is only to be known again. */
  roughInk: Outline;
  body: Ring;
  /** Two short lines each, beyond the body. */
  baselineTicks: [Point, Point][];
  centreTicks: [Point, Point][];
}
export interface PlaceShapes {
  placement: Placement;
  /** As on the ticket and at the bench: in the order of the setup's places, from 1. */
  number: number;
  labels: LabelShape[];
  pieces: PieceShape[];
  box: Box;
}
export interface PlanShapes { order: RunOrder; line(id: string): RunLine; place(placement: Placement, number: number): PlaceShapes }

interface StampShape { ink: Outline; roughInk: Outline; body: Ring; baselineY: number }

/** Ticks begin this far outside the body and are this long, mm. */
const TICK_GAP_MM = 0.8;
const TICK_MM = 4.5;
/** Points that a printer cannot tell apart are left out, mm: half a dot at 600 dpi is 0.021. */
const DRAWN_MM = 0.015;
const ROUGH_MM = 0.045;
/** Feet of letters that stand on one line differ by less, mm. */
const SAME_LINE_MM = 0.35;

export function planShapes(order: RunOrder): PlanShapes {
  const lines = byId(order.lines), stamps = byId(order.stamps), dies = byId(order.dies);
  const cutLine = cached((id: string) => lighter(dieOutline(found(dies, id, 'die').geometry)));
  const stamp = cached((id: string) => stampShape(found(stamps, id, 'stamp')));
  const line = (id: string) => found(lines, id, 'line');
  return {
    order, line,
    place(placement, number) {
      const here = placement.lineIds.map(line);
      const labels = here.map((l): LabelShape => ({
        lineId: l.id, dieId: l.dieId, cut: l.cut ?? 'die',
        outline: mapOutline(cutLine(l.dieId), (q) => added(fromLabel(l, placement.rotationDeg, q), placement)),
      }));
      const pieces = here.length === 0 ? [] : here[0].pieces.map((piece, i) => {
        const at = added(fromLabel(here[0], placement.rotationDeg, piece.centre), placement);
        const angle = labelAngle(here[0], placement.rotationDeg) + piece.rotationDeg;
        return pieceShape(piece.stampId, placement.stamps[i]?.copy ?? 1, stamp(piece.stampId), (p) => added(rotatePoint(p, angle), at));
      });
      const points = [...labels.flatMap((l) => l.outline.rings), ...pieces.map((p) => p.body)].flat();
      return { placement, number, labels, pieces, box: points.length > 0 ? ringBox(points) : { x: placement.x, y: placement.y, w: 0, h: 0 } };
    },
  };
}

function lighter({ rings }: Outline, toleranceMm = DRAWN_MM): Outline {
  return { rings: rings.map((ring) => simplifyRing(ring, toleranceMm)) };
}

/** About the middle of the ink's box. */
function stampShape({ artwork, trimMm }: RunOrder['stamps'][number]): StampShape {
  const middle = boxCentre(outlineBox(artwork));
  const ink = lighter(translateOutline(artwork, -middle.x, -middle.y));
  return { ink, roughInk: lighter(ink, ROUGH_MM), body: growConvex(outlineHull(ink), trimMm), baselineY: baselineOf(ink) };
}

/**
 * Where most letters have their feet: the lower edges of the rings, those within SAME_LINE_MM together, weighted by width; of several
 * lines of words the widest. For a box this is its lower edge.
 */
export function baselineOf(outline: Outline): number {
  const feet = outline.rings.filter((ring) => ring.length > 0).map(ringBox).map(({ y, w, h }) => ({ y: y + h, w }));
  let best = { y: 0, width: -1 };
  for (const { y } of feet) {
    const near = feet.filter((foot) => Math.abs(foot.y - y) <= SAME_LINE_MM);
    const width = near.reduce((sum, foot) => sum + foot.w, 0);
    if (width > best.width + 1e-9 || (Math.abs(width - best.width) <= 1e-9 && y > best.y)) best = { y, width };
  }
  return best.y;
}

function pieceShape(stampId: string, copy: number, stamp: StampShape, place: (p: Point) => Point): PieceShape {
  const { x, y, w, h } = ringBox(stamp.body);
  const tick = (x1: number, y1: number, x2: number, y2: number): [Point, Point] => [place({ x: x1, y: y1 }), place({ x: x2, y: y2 })];
  const left = x - TICK_GAP_MM, right = x + w + TICK_GAP_MM, top = y - TICK_GAP_MM, bottom = y + h + TICK_GAP_MM;
  return {
    stampId, copy, ink: mapOutline(stamp.ink, place), roughInk: mapOutline(stamp.roughInk, place), body: stamp.body.map(place),
    baselineTicks: [tick(left - TICK_MM, stamp.baselineY, left, stamp.baselineY), tick(right, stamp.baselineY, right + TICK_MM, stamp.baselineY)],
    centreTicks: [tick(0, top - TICK_MM, 0, top), tick(0, bottom, 0, bottom + TICK_MM)],
  };
}

function added(p: Point, to: Point): Point {
  return { x: p.x + to.x, y: p.y + to.y };
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
