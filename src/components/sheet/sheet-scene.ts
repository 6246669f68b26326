/**
 * A setup as it lies on the bed, ready to draw: paths in mm and SVG transforms, bed coordinates. Pure. What does not change while a
 * label is dragged (paths) is worked out once an order; a placement is only a transform on them.
 */
import { dieOutline } from '../../../server/engine/fit/die-outline.ts';
import { convexHull } from '../../../server/engine/geometry/hull.ts';
import { boxCentre, outlineBox, ringBox } from '../../../server/engine/geometry/ring.ts';
import { translateOutline } from '../../../server/engine/geometry/transform.ts';
import type { Box, Point } from '../../../server/engine/geometry/types.ts';
import { fromLabel, labelAngle, orderShapes, shapeOfPlacement } from '../../../server/engine/gangrun/place-geometry.ts';
import { sheetFrame } from '../../../server/engine/gangrun/sheet-frame.ts';
import type { Placement, RunLine, RunOrder, Setup } from '../../../server/engine/gangrun/types.ts';
import { outlinePath, ringPath } from './outline-path.ts';

/** Parts of a place, about its own middle with the label upright. */
export interface PlaceParts {
  labels: { lineId: string; cut: RunLine['cut']; d: string; /** Of this label to the first. */ turnDeg: number; shift: string }[];
  inks: { d: string; transform: string; inkId: string }[];
  body: string;
}
export interface PlacedShape { id: number; number: number; transform: string; x: number; y: number; parts: PlaceParts; middle: Point; /** Where the number stands: a corner of the label's box. */ badge: Point; title: string }

/** Of the number, from the corner of the label's box, mm. */
const BADGE_IN_MM = 1;

export interface Bed { bed: Box; sheet: Box; inner: Box; lid: Box; centre: Point; keepOuts: Box[]; corner: string; hinge: 'left' | 'right' | 'top' | 'bottom' }

export function bedOf(order: RunOrder): Bed {
  const frame = sheetFrame(order);
  const { platform } = order;
  return {
    bed: { x: 0, y: 0, w: platform.widthMm, h: platform.heightMm }, sheet: frame.sheet, inner: frame.inner, lid: frame.lid, centre: frame.centre,
    keepOuts: platform.keepOuts, corner: platform.corner ?? 'top-left', hinge: platform.hinge ?? 'left',
  };
}

/** Bed and sheet together, with room for rulers. */
export function viewOf({ bed, sheet }: Bed, room: number): Box {
  const x = Math.min(bed.x, sheet.x), y = Math.min(bed.y, sheet.y);
  const right = Math.max(bed.x + bed.w, sheet.x + sheet.w), bottom = Math.max(bed.y + bed.h, sheet.y + sheet.h);
  return { x: x - room, y: y - room, w: right - x + room * 1.5, h: bottom - y + room * 1.5 };
}

export type Artist = (placement: Placement, number: number) => PlacedShape;

/** Draws the placements of one order; what lines bring along is kept by their ids. */
export function createArtist(order: RunOrder, titleOf: (lineId: string) => string): Artist {
  const shapes = orderShapes(order);
  const known = new Map<string, PlaceParts>();
  const artwork = new Map(order.stamps.map((stamp) => {
    const middle = boxCentre(outlineBox(stamp.artwork));
    return [stamp.id, outlinePath(translateOutline(stamp.artwork, -middle.x, -middle.y))];
  }));
  const cut = new Map(order.dies.map((die) => [die.id, outlinePath(dieOutline(die.geometry))]));

  function parts(lineIds: readonly string[]): PlaceParts {
    const key = lineIds.join();
    const before = known.get(key);
    if (before) return before;
    const lines = lineIds.map(shapes.line);
    const first = lines[0];
    const upright = shapeOfPlacement(shapes, { id: 0, stamps: [], lineIds: [...lineIds], x: 0, y: 0, rotationDeg: first.pieces[0].rotationDeg });
    const made: PlaceParts = {
      labels: lines.map((line) => ({
        lineId: line.id, cut: line.cut, d: cut.get(line.dieId) ?? '', turnDeg: labelAngle(line, first.pieces[0].rotationDeg), shift: `translate(${-line.pieces[0].centre.x} ${-line.pieces[0].centre.y})`,
      })),
      inks: first.pieces.map((piece) => {
        const at = fromLabel(first, first.pieces[0].rotationDeg, piece.centre);
        return { d: artwork.get(piece.stampId) ?? '', transform: `translate(${at.x} ${at.y}) rotate(${piece.rotationDeg})`, inkId: piece.inkId };
      }),
      body: upright.bodies.map((body) => ringPath(body.hull)).join(''),
    };
    known.set(key, made);
    return made;
  }

  /** A placement that has not moved keeps its shape, so that only the dragged one is drawn anew. */
  const drawn = new WeakMap<Placement, PlacedShape>();
  return (placement, number) => {
    const before = drawn.get(placement);
    if (before?.number === number) return before;
    const first = shapes.line(placement.lineIds[0]);
    const angle = labelAngle(first, placement.rotationDeg);
    const box = ringBox(convexHull(shapeOfPlacement(shapes, placement).labels.flat()));
    const shape: PlacedShape = {
      id: placement.id, number, x: placement.x, y: placement.y, transform: `translate(${placement.x} ${placement.y}) rotate(${angle})`, parts: parts(placement.lineIds),
      middle: { x: placement.x + box.x + box.w / 2, y: placement.y + box.y + box.h / 2 },
      badge: { x: placement.x + box.x + BADGE_IN_MM, y: placement.y + box.y + BADGE_IN_MM }, title: [...new Set(placement.lineIds.map(titleOf))].join(', '),
    };
    drawn.set(placement, shape);
    return shape;
  };
}

/** How impression `turn` is drawn: the whole setup turned back about the sheet's middle. */
export function impressionTransform(turn: number, turns: Setup['turns'], centre: Point): string {
  return turn === 0 ? '' : `rotate(${(-turn * 360) / turns} ${centre.x} ${centre.y})`;
}

/** The opened lid: mirrored across its hinge. Only the drawing; words stay readable at the mirrored places. */
export function mirrorTransform({ bed, hinge }: Bed): string {
  return hinge === 'left' || hinge === 'right' ? `translate(${bed.w} 0) scale(-1 1)` : `translate(0 ${bed.h}) scale(1 -1)`;
}
export function mirrorPoint(p: Point, { bed, hinge }: Bed): Point {
  return hinge === 'left' || hinge === 'right' ? { x: bed.w - p.x, y: p.y } : { x: p.x, y: bed.h - p.y };
}

/** From sheet coordinates at turn 0 to the bed. */
export function stripPath(cut: Setup['stripCuts'][number], sheet: Box): string {
  return cut.axis === 'x' ? `M${sheet.x + cut.atMm} ${sheet.y}v${sheet.h}` : `M${sheet.x} ${sheet.y + cut.atMm}h${sheet.w}`;
}

