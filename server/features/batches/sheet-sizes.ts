/**
 * Run sheets worth trying: a sheet of stock whole, or divided into equal parts across and down, either way round, as far as it lies in
 * the platform. Pure; mm. Largest first.
 */
import { lyingFault } from '../../engine/gangrun/sheet-frame.ts';
import type { Platform } from '../../engine/gangrun/types.ts';

export interface SheetSize { widthMm: number; heightMm: number }

/** Into ninths at most; smaller sheets take longer to lay than to stamp. */
const MAX_PARTS = 3;
/** Nothing that a hand can hold down on the bed is narrower. */
const LEAST_MM = 60;
/** So many are planned; each takes a second or so. */
const MAX_SIZES = 8;

export function sheetSizes(stock: SheetSize, platform: Platform, marginMm: number): SheetSize[] {
  const parts = Array.from({ length: MAX_PARTS }, (_, i) => i + 1);
  const sizes = parts.flatMap((across) => parts.flatMap((down) => {
    const [a, b] = [round(stock.widthMm / across), round(stock.heightMm / down)];
    return [{ widthMm: a, heightMm: b }, { widthMm: b, heightMm: a }];
  }));
  const distinct = sizes.filter((size, i) => sizes.findIndex((other) => other.widthMm === size.widthMm && other.heightMm === size.heightMm) === i);
  return distinct
    .filter((size) => Math.min(size.widthMm, size.heightMm) >= LEAST_MM && lyingFault({ sheet: { ...size, marginMm }, platform }) === null)
    .sort((a, b) => b.widthMm * b.heightMm - a.widthMm * a.heightMm || a.widthMm - b.widthMm)
    .slice(0, MAX_SIZES);
}

/** Down to a hundredth of a mm, so that the parts still come out of the sheet; what the division of decimals misses is no part of it. */
const round = (mm: number): number => Math.floor(mm * 100 + 1e-6) / 100;
