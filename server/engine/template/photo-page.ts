/**
 * The photo page: markers at fixed distances from the paper's middle, and nothing in the room where the sheet is laid (see reading/photo-page-layout.ts).
 * Words stand between the markers, the scale check below them; both keep the white that a marker needs. Throws on paper that does not hold the markers.
 */
import { MARKER_QUIET_MM, MARKER_SIDE_MM, markerRings, PHOTO_PAGE_MARKERS } from '../reading/photo-page-layout.ts';
import { ringBox } from '../geometry/ring.ts';
import { moved, path, style, words } from './page-items.ts';
import { finishedPage, madeFor } from './page-layout.ts';
import type { PageContext } from './page-layout.ts';
import { drawableBox } from './printer.ts';
import { FULL_BARS, levelBar } from './scale-check.ts';
import { wrapText } from './text-width.ts';
import type { PageDescription, PageItem, PrinterProfile } from './types.ts';

const WORDS_MM = 2.3;
const WORDS_LINE_MM = 2.9;
/** Height of both bars with their ticks, mm. */
const BARS_MM = 6.2;
const BETWEEN_MM = 2;

export function photoPage(printer: PrinterProfile): PageDescription {
  const context: PageContext = { printer, unit: 'mm', title: '' };
  const middle = { x: printer.paper.widthMm / 2, y: printer.paper.heightMm / 2 };
  const rings = PHOTO_PAGE_MARKERS.map(markerRings);
  const markers = moved(rings.map((marker) => path(marker, 'marker', style.black)), middle.x, middle.y);
  const box = ringBox(rings.flat(2));
  const reach = drawableBox(printer);
  const held = box.x + middle.x >= reach.x && box.y + middle.y >= reach.y && box.x + box.w + middle.x <= reach.x + reach.w && box.y + box.h + middle.y <= reach.y + reach.h;
  if (!held) throw new RangeError(`The photo page needs paper on which ${box.w} × ${box.h} mm in the middle can be printed; this is ${printer.paper.widthMm} × ${printer.paper.heightMm} mm with its margins.`);
  return finishedPage(context, 'Photo page', [...markers, ...moved(wordItems(context), middle.x, middle.y), ...barItems(reach.y + reach.h - middle.y, middle)]);
}

/** Between the markers of the upper and of the lower side. */
function wordItems(context: PageContext): PageItem[] {
  const [corner, side] = PHOTO_PAGE_MARKERS;
  const clear = MARKER_SIDE_MM / 2 + MARKER_QUIET_MM;
  const left = corner.centre.x + clear, width = side.centre.x - clear - left;
  const top = corner.centre.y - MARKER_SIDE_MM / 2;
  const block = (text: string, x: number, y: number) => wrapText(text, width, WORDS_MM).map((l, i) => words({ x, y: y + WORDS_LINE_MM * (i + 1) }, l, WORDS_MM));
  const right = side.centre.x + clear;
  return [
    words({ x: left, y: top + 3.6 }, 'Photo page', 4.2, 'heading', { bold: true }),
    ...block('Lay the sheet inside the markers, flat. Photograph the whole page from above, all markers in the picture, in even light.', left, top + 4),
    ...block(`Print at 100 %. ${madeFor(context)} Nothing else may lie on the page.`, right, top),
  ];
}

function barItems(reachBelow: number, middle: { x: number; y: number }): PageItem[] {
  const lowest = PHOTO_PAGE_MARKERS[5].centre.y + MARKER_SIDE_MM / 2;
  const room = reachBelow - lowest - MARKER_QUIET_MM;
  const [metric, inch] = FULL_BARS;
  const y = lowest + MARKER_QUIET_MM + 1.4;
  // One above the other where there is room; else side by side between the corner markers, as far from all of them as can be.
  if (room >= BARS_MM) return moved([...levelBar(-50, y, metric), ...levelBar(-50, y + 3.6, inch)], middle.x, middle.y);
  const rowY = Math.min(y, reachBelow - 1.3);
  const start = -(metric.lengthMm + BETWEEN_MM + inch.lengthMm) / 2;
  // Their captions have no room at their ends.
  return moved([...levelBar(start, rowY, metric).slice(0, -1), ...levelBar(start + metric.lengthMm + BETWEEN_MM, rowY, inch).slice(0, -1)], middle.x, middle.y)
    .concat(moved([words({ x: -76, y: lowest - 1 }, 'bars below: 100 mm and 4 in', WORDS_MM, 'caption')], middle.x, middle.y));
}

