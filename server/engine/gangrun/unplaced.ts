/**
 * Which lines cannot be made, and why, in words. What is left can each stand alone on the bed; lines whose dies together are too
 * large for one place become places of their own.
 */
import { convexSeparation } from '../geometry/convex.ts';
import { makeKinds, wanted } from './kinds.ts';
import type { Kind } from './kinds.ts';
import { FAULT_MM } from './layout.ts';
import { obstacleMaker } from './obstacles.ts';
import { bestPlace, regionOf } from './packing.ts';
import type { Direction, PackingSpace } from './packing.ts';
import { pieceHulls } from './place-geometry.ts';
import type { OrderShapes } from './place-geometry.ts';
import { allowedTurns, lyingFault } from './sheet-frame.ts';
import type { SheetFrame } from './sheet-frame.ts';
import { cellChoices } from './cells.ts';
import type { RunLine, RunPlan, Setup } from './types.ts';

export type Unplaced = RunPlan['unplaced'][number];
const ANY_DIRECTION: Direction = { x: 1, y: 1, fromRight: false, fromBottom: false };

/** Kinds that can be planned, and the lines that cannot. */
export function sortOut(shapes: OrderShapes, frame: SheetFrame): { kinds: Kind[]; unplaced: Unplaced[] } {
  const { order } = shapes;
  const whole = lyingFault(order) ? { code: 'sheet-does-not-lie', message: lyingFault(order)! }
    : allowedTurns(order).length === 0 ? { code: 'turns-impossible', message: 'Quarter turns need a square sheet.' } : null;
  const unplaced: Unplaced[] = [];
  const good: RunLine[] = [];
  for (const line of order.lines) {
    const fault = whole ?? lineFault(shapes, line);
    if (fault) unplaced.push({ lineId: line.id, ...fault });
    else good.push(line);
  }
  const stands = standing(shapes, frame);
  const single = new Map(good.map((line) => [line.id, makeKinds(shapes, [line])[0]]));
  const placeable = good.filter((line) => {
    const kind = single.get(line.id)!;
    if (stands(kind)) return true;
    unplaced.push({ lineId: line.id, ...whyNot(shapes, frame, kind, stands) });
    return false;
  });
  return { kinds: shareable(shapes, placeable, stands), unplaced };
}

function lineFault(shapes: OrderShapes, line: RunLine): Omit<Unplaced, 'lineId'> | null {
  const { order } = shapes;
  if (!(wanted(line) > 0)) return { code: 'nothing-wanted', message: 'No labels are asked for.' };
  if (line.pieces.length === 0) return { code: 'no-stamp', message: 'No stamp makes this label.' };
  for (const { stampId } of line.pieces) {
    const stamp = order.stamps.find((s) => s.id === stampId);
    const needed = line.pieces.filter((piece) => piece.stampId === stampId).length;
    if (!stamp || stamp.owned < 1) return { code: 'no-stamp', message: 'The stamp of this label is not at hand.' };
    if (stamp.owned < needed) return { code: 'no-stamp', message: `This label needs ${needed} copies of one stamp; ${stamp.owned} ${stamp.owned === 1 ? 'is' : 'are'} owned.` };
  }
  const die = order.dies.find((d) => d.id === line.dieId);
  if (!die || ((line.cut ?? 'die') === 'die' && die.owned < 1)) return { code: 'no-die', message: 'No die is owned that cuts this label.' };
  if (line.pieces.some(({ stampId }) => shapes.stamp(stampId).artwork.rings.every((ring) => ring.length === 0))) return { code: 'no-stamp', message: 'The stamp of this label has no ink.' };
  const hulls = pieceHulls(shapes, line, line.pieces[0].rotationDeg);
  for (let i = 0; i < hulls.length; i++) {
    for (let k = i + 1; k < hulls.length; k++) {
      const room = shapes.stamp(line.pieces[i].stampId).trimMm + shapes.stamp(line.pieces[k].stampId).trimMm;
      const missing = room - convexSeparation(hulls[i], hulls[k]);
      if (missing >= FAULT_MM) return { code: 'pieces-overlap', message: `Two stamps of this label overlap by ${missing.toFixed(1)} mm; move them apart in the label.` };
    }
  }
  return null;
}

/** Whether a kind can stand alone, in some turns that the order allows and with the strips that the machine needs. */
function standing(shapes: OrderShapes, frame: SheetFrame): (kind: Kind, turns?: Setup['turns'][]) => boolean {
  return (kind, turns = allowedTurns(shapes.order)) => kind.copies > 0 && turns.some((t) => spaces(shapes, frame, t).some((space) => bestPlace(space, [], kind, ANY_DIRECTION) !== null));
}

function spaces(shapes: OrderShapes, frame: SheetFrame, turns: Setup['turns']): PackingSpace[] {
  const maker = obstacleMaker(shapes, frame, turns);
  return cellChoices(shapes.order, frame, turns).map(({ cells }) => ({ frame, turns, maker, cells, stamps: shapes.order.stamps, budget: { left: 0, stopped: () => false } }));
}

function whyNot(shapes: OrderShapes, frame: SheetFrame, kind: Kind, stands: ReturnType<typeof standing>): Omit<Unplaced, 'lineId'> {
  const bare = { ...frame, ink: { x: -1e6, y: -1e6, w: 2e6, h: 2e6 } };
  const onSheet = kind.poses.some((pose) => regionOf(pose, frame.inner, bare));
  if (!onSheet) return { code: 'label-too-large', message: 'The label is larger than the sheet inside its margin.' };
  const inCell = allowedTurns(shapes.order).some((t) => cellChoices(shapes.order, frame, t).some(({ cells }) => cells.some((cell) => kind.poses.some((pose) => regionOf(pose, cell, bare)))));
  if (!inCell) return { code: 'label-too-large', message: 'The label is wider than the strips that the die-cutting machine takes.' };
  if (!allowedTurns(shapes.order).includes(1) && stands(kind, [1])) return { code: 'label-too-large', message: 'The label is too large for a sheet that is turned: its impressions would overlap.' };
  return { code: 'ink-off-lid', message: 'There is no place on the lid, off the keep-outs, where this stamp would print its label on the sheet.' };
}

/** Lines share a place as far as the union of their dies can stand. */
function shareable(shapes: OrderShapes, lines: readonly RunLine[], stands: (kind: Kind) => boolean): Kind[] {
  const groups: RunLine[][] = [];
  for (const kind of makeKinds(shapes, lines)) {
    const own: RunLine[][] = [];
    for (const line of kind.lines) {
      const group = own.find((some) => stands(makeKinds(shapes, [...some, line])[0]));
      if (group) group.push(line);
      else own.push([line]);
    }
    groups.push(...own);
  }
  return groups.flatMap((group) => makeKinds(shapes, group)).map((kind, index) => renumber(kind, index));
}

/** Poses are numbered through the order, for the caches of the search. */
function renumber(kind: Kind, index: number): Kind {
  kind.index = index;
  kind.poses.forEach((pose, i) => (pose.id = index * 8 + i));
  return kind;
}
