/** Where a fault is marked on the drawing, and what it is called. Pure; bed coordinates, mm. */
import { rotatePoint } from '../../../server/engine/geometry/transform.ts';
import type { Point } from '../../../server/engine/geometry/types.ts';
import { impressionAngle } from '../../../server/engine/gangrun/sheet-frame.ts';
import type { LayoutFault } from '../../../server/engine/gangrun/types.ts';
import type { PlacedShape } from './sheet-scene.ts';

export interface FaultMark { at: Point; line: string | null; missingMm: number }

export function faultMarks(faults: readonly LayoutFault[], shapes: readonly PlacedShape[], turns: number, centre: Point): FaultMark[] {
  return faults.flatMap((fault): FaultMark[] => {
    const ends = fault.between.flatMap(({ placement, turn }) => {
      const shape = shapes.find(({ id }) => id === placement);
      return shape ? [rotatePoint(shape.middle, impressionAngle(turn, turns), centre)] : [];
    });
    if (ends.length === 0) return [];
    const [a, b = a] = ends;
    return [{ at: { x: (a.x + b.x) / 2, y: (a.y + b.y) / 2 }, line: ends.length === 2 ? `M${a.x} ${a.y}L${b.x} ${b.y}` : null, missingMm: fault.missingMm }];
  });
}

const KIND_WORDS: Record<LayoutFault['kind'], string> = {
  'labels-near': 'stand too near to each other', 'stamps-touch': 'overlap on the lid', 'inks-near': 'are too near for their ink pads', 'off-sheet': 'reaches past the sheet or its margin',
  'off-bed': 'reaches past the lid area', 'keep-out': 'stands on a keep-out', 'feed-width': 'The sheet cannot be cut into pieces that the machine takes',
};

/** A sentence for one fault; `missing` is the distance in the person's unit. */
export function faultWords(fault: LayoutFault, numberOf: (placement: number) => number, missing: string): string {
  if (fault.kind === 'feed-width') return `${KIND_WORDS[fault.kind]}: ${missing} too wide.`;
  const [a, b] = fault.between.map(({ placement, turn }) => `${numberOf(placement)}${turn > 0 ? ` (turn ${turn + 1})` : ''}`);
  return b === undefined ? `Label ${a} ${KIND_WORDS[fault.kind]}: ${missing} missing.` : `Labels ${a} and ${b} ${KIND_WORDS[fault.kind]}: ${missing} missing.`;
}
