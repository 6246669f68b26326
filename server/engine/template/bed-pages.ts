/** The placing sheet, to set stamps face down on in the bed, and the lid sheet, the same drawing mirrored across the hinge, to set them on the open lid. */
import { formatSize } from '../geometry/units.ts';
import { bedItems, bedRegions, mirrored, mirroredBox } from './bed-drawing.ts';
import { drawingPages } from './page-layout.ts';
import { swatchesOf } from './template-context.ts';
import type { SetupContext } from './template-context.ts';
import type { PageDescription } from './types.ts';

export function placingPages(context: SetupContext): PageDescription[] {
  const { order: { sheet, platform }, setup, number, unit } = context;
  const corner = (platform.corner ?? 'top-left').replace('-', ' ');
  return drawingPages(context, {
    name: `Setup ${number}: placing sheet`, heading: 'Placing sheet', side: context.side, swatches: swatchesOf(context),
    notes: [
      `Trim along the solid edge (${formatSize(sheet.widthMm, sheet.heightMm, unit)}) and push it into the ${corner} corner of the bed, printed side up. Set each stamp face down on its drawing, level by the ticks, and close the lid to pick them up. Then take this sheet out.`,
      'Grey shape: ink. Fine dashes: edge of the stamp. Pale line: where the die cuts. Ticks left and right: line of the letters; above and below: its middle.',
      ...turnNote(setup.turns),
    ],
  }, bedItems(context, 'sheet'), bedRegions(context, 'sheet'));
}

export function lidPages(context: SetupContext): PageDescription[] {
  const { order: { platform }, frame, number, unit } = context;
  const hinge = platform.hinge ?? 'left';
  const across = hinge === 'left' || hinge === 'right' ? 'x' : 'y';
  const size = across === 'x' ? platform.widthMm : platform.heightMm;
  return drawingPages(context, {
    name: `Setup ${number}: lid sheet`, heading: 'Lid sheet (mirrored)', side: context.side, swatches: swatchesOf(context),
    notes: [
      `Open the lid flat: its inner side faces up and the hinge is at the ${{ left: 'right', right: 'left', top: 'bottom', bottom: 'top' }[hinge]} of this sheet, as marked. Trim along the solid edge, the lid’s area (${formatSize(frame.lid.w, frame.lid.h, unit)}), and lay it under the clear lid or on it. Set each stamp with its back on the lid, face up, on its drawing.`,
      'The drawing is mirrored as the faces of the stamps are; numbers and words read normally.',
    ],
  }, mirrored(bedItems(context, 'lid'), across, size), bedRegions(context, 'lid').map((box) => mirroredBox(box, across, size)));
}

export function turnNote(turns: 1 | 2 | 4): string[] {
  if (turns === 1) return [];
  return [turns === 2
    ? 'Every sheet is pressed twice: after the first press turn it half way round, into the same corner again.'
    : 'Every sheet is pressed four times: after each press turn it a quarter clockwise, into the same corner again.'];
}
