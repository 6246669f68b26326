/**
 * Pages that stand apart from a plan: the printer test page, the die check sheets, the photo page.
 *
 * The printer test page is drawn without correction: what a ruler says on it is the printer's scale and shift (shift = measured − scale · nominal). The
 * others are corrected like every page.
 */
import { dieOutline, usableOutline } from '../fit/die-outline.ts';
import type { DieGeometry } from '../fit/types.ts';
import { growOutline } from '../geometry/offset.ts';
import { outlineBox } from '../geometry/ring.ts';
import { translateOutline } from '../geometry/transform.ts';
import type { Box, Point } from '../geometry/types.ts';
import { circleArc } from '../geometry/arc.ts';
import { formatLength, formatSize } from '../geometry/units.ts';
import type { LengthUnit } from '../geometry/units.ts';
import { cross, FINE_MM, HAIR_MM, INK, path, PALE, rect, words } from './page-items.ts';
import { drawingPages, finishedPage, madeFor, NOTE_MM, pageLayout } from './page-layout.ts';
import type { PageContext } from './page-layout.ts';
import { printableBox } from './printer.ts';
import { FULL_BARS, levelBar, SHORT_BARS, uprightBar } from './scale-check.ts';
import { shortened, wrapText } from './text-width.ts';
import type { PageDescription, PageItem, PrinterProfile } from './types.ts';

/** ISO/IEC 7810, ID-1: a bank or library card. Its corners' radius is 2.88 to 3.48 mm. */
export const CARD_MM = { w: 85.6, h: 53.98, radius: 3.18 };
/** Of the test cross from the paper's left and top edge. */
export const TEST_CROSS_MM: Point = { x: 30, y: 40 };

export function printerTestPage(printer: PrinterProfile, unit: LengthUnit): PageDescription {
  const { widthMm, heightMm } = printer.paper;
  const reach = printableBox(printer);
  const right = reach.x + reach.w, bottom = reach.y + reach.h;
  const at = TEST_CROSS_MM;
  const column = Math.min(at.x + 14, right - 60);
  const lines = (text: string, x: number, y: number, w: number): PageItem[] => wrapText(text, w, NOTE_MM).map((l, i) => words({ x, y: y + i * 3.5 }, l, NOTE_MM));
  const upright = bottom - at.y > 116 && column + 24 < right;
  // Upright bars left, the rest to their right, as far as the paper goes.
  const besides = upright ? at.x + 26 : column;
  const barsTop = at.y + 14;
  const cardTop = Math.min(barsTop + 64, bottom - CARD_MM.h - 14);
  const levelTop = Math.min(cardTop + CARD_MM.h + 14, bottom - 12);
  const items: PageItem[] = [
    rect({ x: reach.x, y: reach.y, w: reach.w, h: reach.h }, 'margin-frame', { strokeMm: FINE_MM, stroke: INK }),
    cross(at, 8, 'test-cross', { strokeMm: FINE_MM, stroke: INK }),
    words({ x: reach.x + 4, y: reach.y + 8 }, 'Printer test page', 4.6, 'heading', { bold: true }),
    words({ x: reach.x + 4, y: reach.y + 13 }, shortened(`${madeFor({ printer, unit, title: '' })} Drawn without correction.`, reach.w - 8, NOTE_MM), NOTE_MM),
    ...lines(`Print at actual size, 100 %. The middle of the cross is drawn ${formatLength(at.x, 'mm')} (${formatLength(at.x, 'in', { inches: 'decimal' })}) from the left edge of the paper and ${formatLength(at.y, 'mm')} (${formatLength(at.y, 'in', { inches: 'decimal' })}) from its top. Measure both, and the bars, and type what the ruler says.`, at.x + 11, at.y - 12, right - at.x - 15),
    ...lines('1. Bars, level and upright: what do they measure? 2. Cross: how far from the left and from the top edge? 3. Frame: a side that is missing lies beyond what the printer reaches; make that margin larger.', besides, barsTop, right - besides - 4),
    ...levelBars(Math.max(reach.x + 2, Math.min(at.x, right - 116)), levelTop, right),
    ...(upright ? [...uprightBar(at.x - 8, barsTop, FULL_BARS[0]), ...uprightBar(at.x + 4, barsTop, FULL_BARS[1])] : []),
    ...cardItems(besides, cardTop, right),
  ];
  return { name: 'Printer test page', widthMm, heightMm, items };
}

/** Half as long where the paper is too narrow; the other half is measured upright. */
function levelBars(x: number, y: number, right: number): PageItem[] {
  const bars = x + 115 > right ? SHORT_BARS : FULL_BARS;
  return bars.flatMap((bar, i) => levelBar(x, y + 6 * i, bar));
}

function cardItems(x: number, y: number, right: number): PageItem[] {
  if (x + CARD_MM.w > right - 1) return [];
  const { w, h, radius: r } = CARD_MM;
  const ring = [
    ...circleArc({ x: x + r, y: y + r }, r, 180, 90), ...circleArc({ x: x + w - r, y: y + r }, r, 270, 90),
    ...circleArc({ x: x + w - r, y: y + h - r }, r, 0, 90), ...circleArc({ x: x + r, y: y + h - r }, r, 90, 90),
  ];
  return [
    path([ring], 'card', { strokeMm: FINE_MM, stroke: INK }),
    words({ x: x + w / 2, y: y + h / 2 }, 'A bank or library card fits here exactly', NOTE_MM, 'caption', { align: 'middle' }),
    words({ x: x + w / 2, y: y + h / 2 + 4 }, '(85.60 × 53.98 mm, ISO/IEC 7810 ID-1)', 2.3, 'caption', { align: 'middle' }),
  ];
}

const DIE_GAP_MM = 6;
const DIE_CAPTION_MM = 7;

/** Each page as full as it gets, in the order given; a die larger than the paper is tiled. */
export function dieCheckPages(dies: readonly { name: string; geometry: DieGeometry }[], printer: PrinterProfile, unit: LengthUnit): PageDescription[] {
  const context: PageContext = { printer, unit, title: `${dies.length} ${dies.length === 1 ? 'die' : 'dies'}` };
  const head = (name: string) => ({
    name, heading: 'Die check sheet', side: name,
    notes: ['Lay each die on its drawing: firm line, where it cuts; dashes, its stitch line; fine line, its metal edge. A die that does not match gets its right size before anything is stamped.'],
  });
  const { body } = pageLayout(context, head('page 88'));
  const pages: PageItem[][] = [];
  const large: { name: string; items: PageItem[]; region: Box }[] = [];
  let x = 0, y = 0, row = 0;
  for (const die of dies) {
    const rim = die.geometry.rimMm ?? 0;
    const { w, h } = outlineBox(dieOutline(die.geometry));
    const width = Math.max(w + 2 * rim, 30), height = h + 2 * rim + DIE_CAPTION_MM;
    if (width > body.w || height > body.h) {
      large.push({ name: die.name, items: dieItems(die, { x: rim, y: rim }, unit), region: { x: 0, y: 0, w: width, h: height } });
      continue;
    }
    if (x > 0 && x + width > body.w) { x = 0; y += row + DIE_GAP_MM; row = 0; }
    if (pages.length === 0 || y + height > body.h) { pages.push([]); x = 0; y = 0; row = 0; }
    pages[pages.length - 1].push(...dieItems(die, { x: body.x + x + rim, y: body.y + y + rim }, unit));
    x += width + DIE_GAP_MM;
    row = Math.max(row, height);
  }
  if (pages.length === 0 && large.length === 0) pages.push([words({ x: body.x, y: body.y + 6 }, 'There are no dies in this set yet.', 3.4)]);
  return [
    ...pages.map((items, i) => finishedPage(context, `page ${i + 1}`, [...pageLayout(context, head(`page ${i + 1}`)).items, ...items])),
    ...large.flatMap(({ name, items, region }) => drawingPages(context, head(name), items, [region])),
  ];
}

function dieItems({ name, geometry }: { name: string; geometry: DieGeometry }, at: Point, unit: LengthUnit): PageItem[] {
  const cut = translateOutline(dieOutline(geometry), at.x, at.y);
  const { x, y, w, h } = outlineBox(cut);
  const stitch = geometry.stitchInsetMm ? usableOutline(geometry).rings : [];
  const rim = geometry.rimMm ?? 0;
  const size = `${formatSize(w, h, unit)}${geometry.stitchInsetMm ? `, stitch line ${formatLength(geometry.stitchInsetMm, unit)} inside` : ''}`;
  return [
    path(cut.rings, 'die', { strokeMm: FINE_MM, stroke: INK }),
    ...(rim > 0 ? [path(growOutline(cut, rim).rings, 'body', { strokeMm: 0.1, stroke: PALE })] : []),
    ...(stitch.length === 0 ? [] : [path(translateOutline({ rings: stitch }, at.x, at.y).rings, 'body', { strokeMm: HAIR_MM, stroke: PALE, dashMm: [1, 0.8] })]),
    words({ x, y: y + h + rim + 3.4 }, shortened(name, Math.max(w, 28), 2.7, true), 2.7, 'caption', { bold: true }),
    words({ x, y: y + h + rim + 6.6 }, shortened(size, Math.max(w, 28), 2.3), 2.3, 'caption'),
  ];
}

