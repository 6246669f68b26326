/**
 * What is wrong with a layout: every distance that the order asks for and the setups do not keep.
 *
 * Input: an order and setups with their placements, bed coordinates. Output: one fault a pair or placement and kind, with the
 * missing distance in mm; none where all is well. Nothing is mutated. A placement whose line, stamp or die is not in the order
 * throws. Cost: pairs of impressions on a sheet, O(n² · turns) separations of convex hulls, most of them settled by their boxes.
 *
 * Labels of one place are never on one sheet in one turn, so they are not held against each other there; those of different
 * turns are, also of one place. By symmetry it is enough to hold turn 0 against every turn.
 */
import { convexSeparation, translateRing } from '../geometry/convex.ts';
import { ringBox } from '../geometry/ring.ts';
import { rotatePoint } from '../geometry/transform.ts';
import type { Box, Ring } from '../geometry/types.ts';
import { clearanceOf, orderShapes, shapeOfPlacement } from './place-geometry.ts';
import type { OrderShapes } from './place-geometry.ts';
import { impressionAngle, sheetFrame } from './sheet-frame.ts';
import type { SheetFrame } from './sheet-frame.ts';
import { findStrips } from './strips.ts';
import type { LayoutFault, Placement, RunLine, RunOrder, Setup } from './types.ts';

/** Under this a distance is kept, mm: finer than anybody sets a stamp. */
export const FAULT_MM = 0.01;

/** A placement with its shapes where they stand. */
interface Standing { placement: Placement; lines: RunLine[]; labels: Ring[]; bodies: { hull: Ring; trimMm: number }[]; ink: Ring }

type CheckedSetup = Pick<Setup, 'turns' | 'placements'>;

export function checkLayout(order: RunOrder, setups: CheckedSetup[]): LayoutFault[] {
  return createLayoutCheck(order)(setups);
}

/** The same for one order asked again and again, as a drag does: hulls are worked out once, and so is a placement that has not moved. */
export function createLayoutCheck(order: RunOrder): (setups: CheckedSetup[]) => LayoutFault[] {
  const shapes = orderShapes(order);
  const frame = sheetFrame(order);
  const known = new WeakMap<Placement, Standing>();
  const stood = (placement: Placement): Standing => {
    const standing = known.get(placement) ?? stand(shapes, placement);
    known.set(placement, standing);
    return standing;
  };
  return (setups) => setups.flatMap((setup, index) => {
    const standing = setup.placements.map(stood);
    return [...alone(order, frame, standing), ...pairs(order, shapes, standing), ...impressions(order, frame, standing, setup.turns), ...feed(order, frame, standing, setup.turns)]
      .map((fault) => ({ ...fault, setup: index }));
  });
}

type Fault = Omit<LayoutFault, 'setup'>;
const fault = (kind: Fault['kind'], missingMm: number, ...between: Fault['between']): Fault[] => (missingMm < FAULT_MM ? [] : [{ kind, between, missingMm }]);
const at = (place: Standing, turn = 0) => ({ placement: place.placement.id, turn });

function stand(shapes: OrderShapes, placement: Placement): Standing {
  const shape = shapeOfPlacement(shapes, placement);
  const move = (ring: Ring) => translateRing(ring, placement.x, placement.y);
  return {
    placement, lines: placement.lineIds.map(shapes.line), labels: shape.labels.map(move),
    bodies: shape.bodies.map(({ hull, trimMm }) => ({ hull: move(hull), trimMm })), ink: move(shape.ink),
  };
}

/** Bed, sheet, keep-outs, and the stamps of one place among themselves. */
function alone(order: RunOrder, frame: SheetFrame, standing: Standing[]): Fault[] {
  return standing.flatMap((place) => {
    const ink = ringBox(place.ink);
    const offSheet = Math.max(beyond(ink, frame.sheet), ...place.labels.map((label) => beyond(ringBox(label), frame.inner)));
    const faults = [...fault('off-bed', beyond(ink, frame.lid), at(place)), ...fault('off-sheet', offSheet, at(place))];
    const inTheWay = order.platform.keepOuts.map((box) => Math.max(...place.bodies.map((body) => body.trimMm - convexSeparation(body.hull, boxRing(box)))));
    faults.push(...fault('keep-out', Math.max(0, ...inTheWay), at(place)));
    for (let i = 0; i < place.bodies.length; i++) {
      for (let k = i + 1; k < place.bodies.length; k++) faults.push(...fault('stamps-touch', bodyOverlap(place.bodies[i], place.bodies[k]), at(place)));
    }
    return faults;
  });
}

/** What stands on the lid together. */
function pairs(order: RunOrder, shapes: OrderShapes, standing: Standing[]): Fault[] {
  return everyPair(standing).flatMap(([a, b]) => {
    const touch = Math.max(...a.bodies.flatMap((p) => b.bodies.map((q) => bodyOverlap(p, q))));
    const clear = clearanceOf(shapes, a.lines, b.lines);
    const ink = clear > 0 ? missing(a.ink, b.ink, clear) : 0;
    return [...fault('stamps-touch', touch, at(a), at(b)), ...fault('inks-near', ink, at(a), at(b)), ...fault('labels-near', nearest(a.labels, b.labels, order.gapMm), at(a), at(b))];
  });
}

/** Turn 0 against the other turns, where the sheet was laid down anew. */
function impressions(order: RunOrder, frame: SheetFrame, standing: Standing[], turns: Setup['turns']): Fault[] {
  const gap = order.gapMm + order.turnToleranceMm;
  const faults: Fault[] = [];
  for (let turn = 1; turn < turns; turn++) {
    const turned = standing.map((place) => place.labels.map((label) => turnRing(label, turn, turns, frame)));
    standing.forEach((a, i) => standing.forEach((b, k) => {
      // A place and its own turned impression meet in turn t as in turns − t; one of them says it.
      if (i === k && turn > turns / 2) return;
      faults.push(...fault('labels-near', nearest(a.labels, turned[k], gap), at(a), at(b, turn)));
    }));
  }
  return faults;
}

function feed(order: RunOrder, frame: SheetFrame, standing: Standing[], turns: Setup['turns']): Fault[] {
  const boxes = labelBoxesOnSheet(frame, standing.flatMap((place) => place.labels), turns);
  return fault('feed-width', findStrips(order.sheet, boxes, order.maxFeedWidthMm).missingMm);
}

/** Boxes of labels (bed coordinates) in all turns, in sheet coordinates as at turn 0. */
export function labelBoxesOnSheet(frame: SheetFrame, labels: readonly Ring[], turns: Setup['turns']): Box[] {
  return Array.from({ length: turns }, (_, turn) => labels.map((label) => {
    const box = ringBox(turnRing(label, turn, turns, frame));
    return { ...box, x: box.x - frame.sheet.x, y: box.y - frame.sheet.y };
  })).flat();
}

export function turnRing(ring: Ring, turn: number, turns: number, frame: SheetFrame): Ring {
  return turn === 0 ? ring : ring.map((p) => rotatePoint(p, impressionAngle(turn, turns), frame.centre));
}

function bodyOverlap(a: Standing['bodies'][number], b: Standing['bodies'][number]): number {
  return missing(a.hull, b.hull, a.trimMm + b.trimMm);
}

function nearest(a: readonly Ring[], b: readonly Ring[], gap: number): number {
  let worst = 0;
  for (const p of a) for (const q of b) worst = Math.max(worst, missing(p, q, gap));
  return worst;
}

/** Required − distance; 0 where it is kept. Boxes that are far enough apart need no closer look. */
function missing(a: Ring, b: Ring, required: number): number {
  const p = ringBox(a), q = ringBox(b);
  if (p.x + p.w + required <= q.x || q.x + q.w + required <= p.x || p.y + p.h + required <= q.y || q.y + q.h + required <= p.y) return 0;
  return Math.max(0, required - convexSeparation(a, b));
}

/** How far the inner box reaches beyond the outer one, on its worst side. */
function beyond(inner: Box, outer: Box): number {
  return Math.max(0, outer.x - inner.x, outer.y - inner.y, inner.x + inner.w - outer.x - outer.w, inner.y + inner.h - outer.y - outer.h);
}

export function boxRing({ x, y, w, h }: Box): Ring {
  return [{ x, y }, { x: x + w, y }, { x: x + w, y: y + h }, { x, y: y + h }];
}

function everyPair<T>(items: readonly T[]): [T, T][] {
  return items.flatMap((a, i) => items.slice(i + 1).map((b): [T, T] => [a, b]));
}
