/** Paths that mark the bed: the corner that the sheet is pushed into, and the side on which the lid turns. Pure; mm. */
import type { Bed } from './sheet-scene.ts';

/** Legs of the corner mark, and how far outside the sheet it runs. */
const LEG_MM = 14, OUT_MM = 0.8;
/** The hinge: two short lines beside the bed. */
const HINGE_MM = 16, HINGE_OUT_MM = 1.6;

export function cornerPath({ sheet, corner }: Pick<Bed, 'sheet' | 'corner'>): string {
  const left = corner.endsWith('left'), top = corner.startsWith('top');
  const x = left ? sheet.x - OUT_MM : sheet.x + sheet.w + OUT_MM, y = top ? sheet.y - OUT_MM : sheet.y + sheet.h + OUT_MM;
  return `M${x + (left ? LEG_MM : -LEG_MM)} ${y}H${x}V${y + (top ? LEG_MM : -LEG_MM)}`;
}

export function hingePath({ bed, hinge }: Pick<Bed, 'bed' | 'hinge'>): string {
  const thirds = [1 / 4, 3 / 4];
  if (hinge === 'left' || hinge === 'right') {
    const x = hinge === 'left' ? bed.x - HINGE_OUT_MM : bed.x + bed.w + HINGE_OUT_MM;
    return thirds.map((share) => `M${x} ${bed.y + bed.h * share - HINGE_MM / 2}v${HINGE_MM}`).join('');
  }
  const y = hinge === 'top' ? bed.y - HINGE_OUT_MM : bed.y + bed.h + HINGE_OUT_MM;
  return thirds.map((share) => `M${bed.x + bed.w * share - HINGE_MM / 2} ${y}h${HINGE_MM}`).join('');
}
