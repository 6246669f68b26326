/**
 * Placements that the person has fixed: checked by themselves, and made part of their kinds. A pin that cannot stand makes its
 * lines unplaced; the others stay where they are, to the last digit.
 */
import { makePose } from './kinds.ts';
import type { Kind } from './kinds.ts';
import { checkLayout } from './layout.ts';
import type { Placed } from './packing.ts';
import type { OrderShapes } from './place-geometry.ts';
import { allowedTurns } from './sheet-frame.ts';
import type { Unplaced } from './unplaced.ts';
import type { Placement, RunOrder, Setup } from './types.ts';

export interface Pins { bySetup: Placed[][]; unplaced: Unplaced[] }

export function readPins(shapes: OrderShapes, kinds: readonly Kind[]): Pins {
  const { order } = shapes;
  const bySetup: Placed[][] = [];
  const unplaced: Unplaced[] = [];
  const kept: { setup: number; placement: Placement }[] = [];
  let poseId = 8 * (kinds.length + 1);
  const placeable = new Set(kinds.flatMap((kind) => kind.lines.map((line) => line.id)));
  for (const pin of order.pinned ?? []) {
    const kind = kinds.find((k) => k.lines.some((line) => pin.placement.lineIds.includes(line.id)));
    if (!kind) continue;
    const why = pinFault(shapes, kind, pin, kept);
    if (why !== null) {
      for (const lineId of pin.placement.lineIds) if (placeable.has(lineId) && !unplaced.some((row) => row.lineId === lineId)) unplaced.push({ lineId, code: 'pin-conflict', message: why });
      continue;
    }
    kept.push(pin);
    while (bySetup.length <= pin.setup) bySetup.push([]);
    const { x, y, rotationDeg } = pin.placement;
    bySetup[pin.setup].push({ pose: makePose(shapes, kind, rotationDeg, poseId++), x, y, pin: pin.placement });
  }
  return { bySetup, unplaced };
}

function pinFault(shapes: OrderShapes, kind: Kind, pin: { setup: number; placement: Placement }, kept: { setup: number; placement: Placement }[]): string | null {
  const { placement } = pin;
  if (!Number.isInteger(pin.setup) || pin.setup < 0) return 'The pinned place names no setup.';
  const pieces = kind.lines[0].pieces;
  if (placement.stamps.length !== pieces.length || placement.stamps.some((stamp, i) => stamp.stampId !== pieces[i].stampId)) return 'The pinned place holds other stamps than this label needs.';
  if (placement.stamps.some(({ stampId, copy }) => !(copy >= 1 && copy <= shapes.stamp(stampId).owned))) return 'The pinned place uses a copy of the stamp that is not owned.';
  const angle = (placement.rotationDeg - pieces[0].rotationDeg) % 360;
  if (angle !== 0 && kind.lines.some((line) => !line.mayTurn)) return 'The pinned place turns a label that must not turn.';
  const others = kept.filter((other) => other.setup === pin.setup).map((other) => other.placement);
  if (others.some((other) => other.id === placement.id)) return 'Two pinned places of a setup have one number.';
  if (others.some((other) => other.stamps.some((s) => placement.stamps.some((t) => t.stampId === s.stampId && t.copy === s.copy)))) return 'The same stamp is pinned at two places.';
  const whole = { ...placement, lineIds: kind.lines.map((line) => line.id) };
  return standsSomehow(shapes.order, [...others, whole]) ? null : others.length > 0 && standsSomehow(shapes.order, [whole]) ? 'The pinned place is too near to another pinned place.' : 'The label cannot stand where it is pinned.';
}

function standsSomehow(order: RunOrder, placements: Placement[]): boolean {
  return allowedTurns(order).some((turns: Setup['turns']) => checkLayout(order, [{ turns, placements }]).length === 0);
}
