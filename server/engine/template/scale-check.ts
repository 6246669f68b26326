/**
 * The scale check of every page: a bar of 100 mm and one of 4 in, exactly as long as they say. Where the paper is too narrow they stand
 * upright at its left; where it is too small for both ways, they are 50 mm and 2 in and say so. Output: the items and the room they leave.
 */
import { MM_PER_INCH } from '../geometry/units.ts';
import type { Box } from '../geometry/types.ts';
import { FINE_MM, INK, line, rect, style, words } from './page-items.ts';
import { wrapText } from './text-width.ts';
import type { PageItem } from './types.ts';

const BAR_MM = 1.2;
const TICK_MM = 1.3;
const CAPTION_MM = 2.4;
const ROW_MM = 4.6;
const LINE_MM = 3.1;
/** Least width for words beside the bars; else they stand above. */
const BESIDE_MM = 55;
const LABEL_MM = 13;

interface Bar { lengthMm: number; stepMm: number; label: string }

function bars(short: boolean): Bar[] {
  const n = short ? 0.5 : 1;
  return [
    { lengthMm: 100 * n, stepMm: 10, label: short ? '50 mm' : '100 mm' },
    { lengthMm: 4 * MM_PER_INCH * n, stepMm: MM_PER_INCH, label: short ? '2 in' : '4 in' },
  ];
}

/** Along x, its left end and upper edge at x, y; ticks stand on it. */
export function levelBar(x: number, y: number, bar: Bar): PageItem[] {
  const ticks = Math.round(bar.lengthMm / bar.stepMm);
  return [
    rect({ x, y, w: bar.lengthMm, h: BAR_MM }, 'scale-bar', style.solid),
    ...Array.from({ length: ticks + 1 }, (_, i) => line(x + i * bar.stepMm, y - TICK_MM, x + i * bar.stepMm, y, 'scale-tick', { strokeMm: FINE_MM, stroke: INK })),
    words({ x: x + bar.lengthMm + 1.6, y: y + BAR_MM }, bar.label, CAPTION_MM, 'caption', { bold: true }),
  ];
}

/** Along y, its upper end and left edge at x, y; ticks at its right. */
export function uprightBar(x: number, y: number, bar: Bar): PageItem[] {
  const ticks = Math.round(bar.lengthMm / bar.stepMm);
  return [
    rect({ x, y, w: BAR_MM, h: bar.lengthMm }, 'scale-bar', style.solid),
    ...Array.from({ length: ticks + 1 }, (_, i) => line(x + BAR_MM, y + i * bar.stepMm, x + BAR_MM + TICK_MM, y + i * bar.stepMm, 'scale-tick', { strokeMm: FINE_MM, stroke: INK })),
    words({ x, y: y + bar.lengthMm + 3 }, bar.label, CAPTION_MM, 'caption', { bold: true }),
  ];
}

export const FULL_BARS = bars(false);
export const SHORT_BARS = bars(true);

/** At the bottom of `room` (or its left side); the second box is what is left of the room. */
export function scaleCheck(room: Box, madeFor: string): { items: PageItem[]; left: Box } {
  const longest = 4 * MM_PER_INCH;
  const level = room.w >= longest + LABEL_MM;
  const upright = !level && room.h >= longest + 30;
  const short = !level && !upright;
  const [metric, inch] = bars(short);
  const text = `Scale check: lay a ruler on both bars before use. ${short ? 'They are short for this small paper. ' : ''}If they are off, print at 100 %, not “fit to page”. ${madeFor}`;
  const right = room.x + room.w, bottom = room.y + room.h;

  if (upright) {
    const lines = wrapText(text, room.w, CAPTION_MM);
    const top = bottom - lines.length * LINE_MM - 2;
    const items = [
      ...uprightBar(room.x, top - longest - 5, metric), ...uprightBar(room.x + 10, top - longest - 5, inch),
      ...lines.map((l, i) => words({ x: room.x, y: top + (i + 1) * LINE_MM }, l, CAPTION_MM, 'caption')),
    ];
    return { items, left: { x: room.x + 20, y: room.y, w: room.w - 20, h: top - room.y } };
  }
  const barsRight = room.x + inch.lengthMm + LABEL_MM;
  const beside = right - barsRight >= BESIDE_MM;
  const lines = wrapText(text, beside ? right - barsRight - 3 : room.w, CAPTION_MM);
  const barsTop = bottom - 2 * ROW_MM;
  const barItems = [...levelBar(room.x, barsTop + ROW_MM - BAR_MM - 0.4, metric), ...levelBar(room.x, bottom - BAR_MM, inch)];
  if (beside) {
    const height = Math.max(2 * ROW_MM, lines.length * LINE_MM);
    const items = [...barItems, ...lines.map((l, i) => words({ x: barsRight + 3, y: bottom - (lines.length - 1 - i) * LINE_MM }, l, CAPTION_MM, 'caption'))];
    return { items, left: { ...room, h: room.h - height - 2 } };
  }
  const items = [...barItems, ...lines.map((l, i) => words({ x: room.x, y: barsTop - (lines.length - 1 - i) * LINE_MM - 1 }, l, CAPTION_MM, 'caption'))];
  return { items, left: { ...room, h: room.h - 2 * ROW_MM - lines.length * LINE_MM - 2 } };
}
