/** Numbers of a platform's drawing: bed, lid area, corner, hinge, open sides, keep-outs. Input mm in bed coordinates, output px. */
import type { Corner, Side } from '../../api/gear.ts';
import { scaleTo } from './drawing-scale.ts';
import type { Frame } from './drawing-scale.ts';

interface Box { x: number; y: number; w: number; h: number }
export interface DrawnPlatform { widthMm: number; heightMm: number; corner: Corner; hinge: Side; openSides: readonly Side[] | null; lid: Box | null; keepOuts: readonly Box[] }

/** Sides over which a sheet may hang where nobody said otherwise: those away from the corner, less the hinge's. */
export function usualOpenSides(corner: Corner, hinge: Side): Side[] {
  const away: Side[] = [corner.endsWith('left') ? 'right' : 'left', corner.startsWith('top') ? 'bottom' : 'top'];
  return away.filter((side) => side !== hinge);
}

const HINGE_PX = 9;
const KNUCKLES = 3;
const ARROW_PX = 11;

export function drawPlatform(platform: DrawnPlatform, frame: Frame, shared?: { widthMm: number; heightMm: number }) {
  const scale = scaleTo(frame, platform.widthMm, platform.heightMm, shared);
  const box = (b: Box) => ({ x: scale.x(b.x), y: scale.y(b.y), w: scale.size(b.w), h: scale.size(b.h) });
  const bed = box({ x: 0, y: 0, w: platform.widthMm, h: platform.heightMm });
  return {
    bed,
    lid: platform.lid ? box(platform.lid) : null,
    keepOuts: platform.keepOuts.map((b, i) => ({ ...box(b), number: i + 1 })),
    corner: cornerPath(bed, platform.corner, Math.min(bed.w, bed.h) * 0.32),
    hinge: knuckles(bed, platform.hinge),
    open: (platform.openSides ?? usualOpenSides(platform.corner, platform.hinge)).map((side) => arrow(bed, side)),
  };
}

/** Along the two walls that the sheet is pushed against, just outside the bed. */
function cornerPath(bed: Box, corner: Corner, length: number): string {
  const left = corner.endsWith('left'), top = corner.startsWith('top');
  const x = left ? bed.x - 3 : bed.x + bed.w + 3, y = top ? bed.y - 3 : bed.y + bed.h + 3;
  return `M${x} ${y + (top ? length : -length)}V${y}H${x + (left ? length : -length)}`;
}

function knuckles(bed: Box, side: Side): Box[] {
  const upright = side === 'left' || side === 'right';
  const whole = upright ? bed.h : bed.w, one = whole / (2 * KNUCKLES + 1);
  return Array.from({ length: KNUCKLES }, (_, i) => {
    const along = one * (2 * i + 1);
    const x = side === 'left' ? bed.x - HINGE_PX - 6 : side === 'right' ? bed.x + bed.w + 6 : bed.x + along;
    const y = side === 'top' ? bed.y - HINGE_PX - 6 : side === 'bottom' ? bed.y + bed.h + 6 : bed.y + along;
    return { x, y, w: upright ? HINGE_PX : one, h: upright ? one : HINGE_PX };
  });
}

/** Points outwards from the middle of a side: here the sheet may reach past the bed. */
function arrow(bed: Box, side: Side): string {
  const [dx, dy] = { left: [-1, 0], right: [1, 0], top: [0, -1], bottom: [0, 1] }[side];
  const x = bed.x + bed.w / 2 + (dx * bed.w) / 2, y = bed.y + bed.h / 2 + (dy * bed.h) / 2;
  const tip = { x: x + dx * ARROW_PX, y: y + dy * ARROW_PX };
  const wing = (turn: 1 | -1) => `L${tip.x - dx * 5 + dy * 4 * turn} ${tip.y - dy * 5 + dx * 4 * turn}`;
  return `M${x - dx * ARROW_PX} ${y - dy * ARROW_PX}L${tip.x} ${tip.y}${wing(1)}M${tip.x} ${tip.y}${wing(-1)}`;
}
