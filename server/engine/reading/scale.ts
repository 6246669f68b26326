/**
 * From what is known about a picture's size to the map from picture to true sheet.
 *
 * Input: what the person gave, and what the file says. Output: a homography from picture px to mm, and where it came from; null where nothing
 * is known. A typed density wins over a ruler, that over a sheet's corners, and all over the file. Throws ReadingError `bad-scale` on
 * values that give no scale: an empty ruler, corners on a line, a density of 0. Nothing is mutated.
 */
import { MM_PER_INCH } from '../geometry/units.ts';
import { homographyFrom, scaling, type Homography } from './homography.ts';
import { ReadingError } from './reading-error.ts';
import type { Reading, ReadOptions } from './types.ts';

export interface Scale { pxToMm: Homography; source: NonNullable<Reading['scaleSource']> }

export function givenScale(options: Pick<ReadOptions, 'dpi' | 'ruler' | 'sheet'>): Scale | null {
  const { dpi, ruler, sheet } = options;
  if (dpi !== undefined) {
    if (!(dpi > 0) || !Number.isFinite(dpi)) throw badScale(`A density is a number above 0, not ${dpi}.`);
    return { pxToMm: scaling(MM_PER_INCH / dpi, MM_PER_INCH / dpi), source: 'typed' };
  }
  if (ruler) {
    const px = Math.hypot(ruler.to.x - ruler.from.x, ruler.to.y - ruler.from.y);
    if (!(px > 0) || !(ruler.lengthMm > 0)) throw badScale('A ruler needs two different places and a length above 0.');
    return { pxToMm: scaling(ruler.lengthMm / px, ruler.lengthMm / px), source: 'ruler' };
  }
  if (sheet) {
    const { widthMm: w, heightMm: h } = sheet;
    const corners = [{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }];
    const pxToMm = w > 0 && h > 0 && isConvexQuad(sheet.cornersPx) ? homographyFrom(sheet.cornersPx, corners) : null;
    if (!pxToMm) throw badScale('The four corners must go once round the sheet: top left, top right, bottom right, bottom left.');
    return { pxToMm, source: 'sheet' };
  }
  return null;
}

export function fileScale(dpi: { x: number; y: number } | null): Scale | null {
  return dpi && { pxToMm: scaling(MM_PER_INCH / dpi.x, MM_PER_INCH / dpi.y), source: 'file' };
}

/** Clockwise as seen, as the corners are asked for; a sheet seen from above shows no other way round. */
function isConvexQuad(corners: readonly { x: number; y: number }[]): boolean {
  return corners.every((a, i) => {
    const b = corners[(i + 1) % 4], c = corners[(i + 2) % 4];
    return (b.x - a.x) * (c.y - b.y) - (b.y - a.y) * (c.x - b.x) > 0;
  });
}

function badScale(message: string): ReadingError {
  return new ReadingError('bad-scale', message);
}
