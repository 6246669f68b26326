/**
 * What stands round every drawing: heading and words above, scale check and the printer's name below; the box between them is the drawing's.
 * And the way a drawing gets onto paper: in one piece where it fits, else in tiles that overlap and have marks to join them by.
 *
 * Coordinates of the page: mm from the paper's top left, as they are wanted on the printed page; the printer's correction comes last.
 */
import { formatSize } from '../geometry/units.ts';
import type { LengthUnit } from '../geometry/units.ts';
import { boxCentre } from '../geometry/ring.ts';
import type { Box } from '../geometry/types.ts';
import { clipItems } from './clip.ts';
import { INK, line, moved, rect, style, words } from './page-items.ts';
import { correctedPage, drawableBox } from './printer.ts';
import { scaleCheck } from './scale-check.ts';
import { shortened, textWidth, wrapText } from './text-width.ts';
import { tilesOf } from './tiles.ts';
import type { PageDescription, PageItem, PrinterProfile } from './types.ts';

export interface PageContext { printer: PrinterProfile; unit: LengthUnit; title: string; printerName?: string }

export interface Swatch { letter: string; name: string; colour?: string }
export interface PageHead {
  /** Unique in the document. */
  name: string;
  heading: string;
  /** At the heading's right: which setup. */
  side?: string;
  notes?: string[];
  swatches?: Swatch[];
}

const HEADING_MM = 4.6;
const SIDE_MM = 3.2;
export const NOTE_MM = 2.6;
const NOTE_LINE_MM = 3.5;
/** Nothing right at the limit of what the printer reaches, mm. */
const INSET_MM = 1;

/** Where nothing is drawn yet, and all that stands round it. */
export function pageLayout(context: PageContext, head: PageHead): { body: Box; items: PageItem[] } {
  const printable = drawableBox(context.printer);
  const room = { x: printable.x + INSET_MM, y: printable.y + INSET_MM, w: printable.w - 2 * INSET_MM, h: printable.h - 2 * INSET_MM };
  const below = scaleCheck(room, madeFor(context));
  const above = headItems(context, head, below.left);
  const top = above.bottom + 2;
  return { body: { x: below.left.x, y: top, w: below.left.w, h: below.left.y + below.left.h - top }, items: [...above.items, ...below.items] };
}

/** For a tall drawing on wide paper: all words and the bars in a column at the right. */
function columnLayout(context: PageContext, head: PageHead): { body: Box; items: PageItem[] } | null {
  const printable = drawableBox(context.printer);
  const room = { x: printable.x + INSET_MM, y: printable.y + INSET_MM, w: printable.w - 2 * INSET_MM, h: printable.h - 2 * INSET_MM };
  if (room.w < 2 * COLUMN_MM) return null;
  const column = { ...room, x: room.x + room.w - COLUMN_MM, w: COLUMN_MM };
  const below = scaleCheck(column, madeFor(context));
  const above = headItems(context, head, column);
  // The bars stand upright below the words; without room for both the drawing is tiled.
  if (above.bottom > room.y + room.h - UPRIGHT_MM) return null;
  return { body: { ...room, w: room.w - COLUMN_MM - 4 }, items: [...above.items, ...below.items] };
}
const COLUMN_MM = 68;
/** Upright bars with their captions and the words below them, mm. */
const UPRIGHT_MM = 132;

export function madeFor({ printer, printerName, unit }: PageContext): string {
  const name = printerName ?? printer.name;
  const paper = formatSize(printer.paper.widthMm, printer.paper.heightMm, unit, { inches: 'decimal' });
  return `Made for ${name === undefined ? 'a printer without a name' : `the printer “${name}”`}, paper ${paper}.`;
}

function headItems(context: PageContext, head: PageHead, room: Box): { items: PageItem[]; bottom: number } {
  const right = room.x + room.w;
  let y = room.y + HEADING_MM * 0.8;
  const items: PageItem[] = [words({ x: room.x, y }, shortened(head.heading, room.w, HEADING_MM, true), HEADING_MM, 'heading', { bold: true })];
  const side = [context.title, head.side].filter((s) => s !== undefined && s !== '').join(' · ');
  const beside = room.w - textWidth(head.heading, HEADING_MM, true) - 6;
  if (textWidth(side, SIDE_MM) <= beside) items.push(words({ x: right, y }, side, SIDE_MM, 'heading', { align: 'right' }));
  else {
    y += 4.4;
    items.push(words({ x: room.x, y }, shortened(side, room.w, SIDE_MM), SIDE_MM, 'heading'));
  }
  y += 1.8;
  items.push(line(room.x, y, right, y, 'rule', { strokeMm: 0.3, stroke: INK }));
  for (const note of head.notes ?? []) {
    for (const text of wrapText(note, room.w, NOTE_MM)) {
      y += NOTE_LINE_MM;
      items.push(words({ x: room.x, y }, text, NOTE_MM));
    }
  }
  if (head.swatches && head.swatches.length > 0) y = swatchRows(head.swatches, room, y, items);
  return { items, bottom: y };
}

/** Letter and name carry the meaning, the colour only helps. */
function swatchRows(swatches: readonly Swatch[], room: Box, from: number, items: PageItem[]): number {
  let x = room.x, y = from + 4.6;
  for (const { letter, name, colour } of swatches) {
    const text = shortened(name, room.w - 14, NOTE_MM);
    const width = 11 + textWidth(text, NOTE_MM);
    if (x > room.x && x + width > room.x + room.w) {
      x = room.x;
      y += 4.4;
    }
    items.push(
      words({ x, y }, letter, 3, 'ink-name', { bold: true }),
      rect({ x: x + 4, y: y - 2.5, w: 4, h: 3 }, 'swatch', { strokeMm: 0.15, stroke: INK, ...(colour === undefined ? {} : { fill: colour }) }),
      words({ x: x + 9.2, y }, text, NOTE_MM, 'ink-name'),
    );
    x += width + 5;
  }
  return y;
}

export function finishedPage(context: PageContext, name: string, items: PageItem[]): PageDescription {
  const { widthMm, heightMm } = context.printer.paper;
  return correctedPage({ name, widthMm, heightMm, items }, context.printer);
}

/**
 * A drawing at true size. `regions`: boxes of the drawing, the one with all that is useful first, the last one with all that is needed; the first that
 * fits on the paper is drawn in one piece, else the last in tiles.
 */
export function drawingPages(context: PageContext, head: PageHead, drawing: readonly PageItem[], regions: readonly Box[]): PageDescription[] {
  for (const whole of [pageLayout(context, head), columnLayout(context, head)]) {
    const region = whole && regions.find((r) => r.w <= whole.body.w && r.h <= whole.body.h);
    if (!whole || !region) continue;
    const centre = boxCentre(whole.body);
    const dx = centre.x - (region.x + region.w / 2), dy = Math.max(whole.body.y - region.y, Math.min(centre.y - (region.y + region.h / 2), whole.body.y + 4 - region.y));
    return [finishedPage(context, head.name, [...whole.items, ...clipItems(moved(drawing, dx, dy), whole.body)])];
  }
  return tiledPages(context, head, drawing, regions[regions.length - 1]);
}

function tiledPages(context: PageContext, head: PageHead, drawing: readonly PageItem[], region: Box): PageDescription[] {
  // The words of a tile take room too: the layout is made with the longest there can be.
  const tileNote = (text: string): PageHead => ({ ...head, notes: [...(head.notes ?? []), text] });
  const { body } = pageLayout(context, tileNote('Tile 88 of 88 (row 8, column 8). Lay crosses with the same letter on each other, check the bars, and tape the tiles.'));
  if (body.w < 30 || body.h < 30) throw new RangeError(`The paper leaves ${body.w} × ${body.h} mm for a drawing, too little even for tiles.`);
  const { tiles, marks } = tilesOf(region, body);
  return tiles.map(({ window, row, column }, i) => {
    const name = `${head.name}, tile ${i + 1}`;
    const layout = pageLayout(context, { ...tileNote(`Tile ${i + 1} of ${tiles.length} (row ${row + 1}, column ${column + 1}). Lay crosses with the same letter on each other, check the bars, and tape the tiles.`), name });
    const items = clipItems([...drawing, ...marks], window);
    return finishedPage(context, name, [...layout.items, ...moved(items, body.x - window.x, body.y - window.y), rect(body, 'rule', style.faint)]);
  });
}
