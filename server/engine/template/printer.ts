/**
 * From wanted to drawn: what must be drawn so that the printer puts it where it is wanted.
 *
 * printed = scale · drawn + shift on each axis, origin at the paper's top left; so drawn = (wanted − shift) / scale. It is the last thing
 * done to a page, after mirroring and tiling. Line widths stay: they carry no measure. Nothing is mutated.
 */
import type { Box, Point } from '../geometry/types.ts';
import type { PageDescription, PrinterProfile } from './types.ts';

export function checkPrinter(printer: PrinterProfile): void {
  const { paper, unprintable, scale, shift } = printer;
  const figures = { ...paper, ...scale };
  for (const [key, value] of Object.entries(figures)) if (!(Number.isFinite(value) && value > 0)) throw new RangeError(`A printer's ${key} is more than 0, not ${value}.`);
  for (const [key, value] of Object.entries(unprintable)) if (!(Number.isFinite(value) && value >= 0)) throw new RangeError(`An unprintable margin (${key}) is 0 or more, not ${value}.`);
  for (const [key, value] of Object.entries(shift)) if (!Number.isFinite(value)) throw new RangeError(`A printer's shift (${key}) is a length, not ${value}.`);
  const { w, h } = drawableBox(printer);
  if (w < LEAST_SIDE_MM || h < LEAST_SIDE_MM) throw new RangeError(`The margins leave only ${w} × ${h} mm of the paper to print on; a page needs ${LEAST_SIDE_MM} mm each way.`);
}
/** A 50 mm bar and its words must find room. */
const LEAST_SIDE_MM = 70;

/** What the printer can reach of the paper. */
export function printableBox({ paper, unprintable }: Pick<PrinterProfile, 'paper' | 'unprintable'>): Box {
  return {
    x: unprintable.left, y: unprintable.top,
    w: paper.widthMm - unprintable.left - unprintable.right, h: paper.heightMm - unprintable.top - unprintable.bottom,
  };
}

/**
 * What of that can be drawn, too: a printer that prints small or shifted would need lines beyond the edge of the drawn page, which has the paper's size.
 * In printed places the drawn page reaches from shift to scale · size + shift.
 */
export function drawableBox(printer: PrinterProfile): Box {
  const { paper, scale, shift } = printer;
  const { x, y, w, h } = printableBox(printer);
  const left = Math.max(x, shift.x), top = Math.max(y, shift.y);
  return { x: left, y: top, w: Math.min(x + w, scale.x * paper.widthMm + shift.x) - left, h: Math.min(y + h, scale.y * paper.heightMm + shift.y) - top };
}

export function correctedPage(page: PageDescription, { scale, shift }: PrinterProfile): PageDescription {
  if (scale.x === 1 && scale.y === 1 && shift.x === 0 && shift.y === 0) return page;
  const drawn = (p: Point): Point => ({ x: (p.x - shift.x) / scale.x, y: (p.y - shift.y) / scale.y });
  // A font has one size: letters keep their proportions and are right on the whole.
  const size = Math.sqrt(scale.x * scale.y);
  return {
    ...page,
    items: page.items.map((item) => (item.kind === 'text'
      ? { ...item, at: drawn(item.at), sizeMm: item.sizeMm / size }
      : { ...item, rings: item.rings.map((ring) => ring.map(drawn)) })),
  };
}
