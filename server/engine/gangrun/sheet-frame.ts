/**
 * Where the sheet lies on the bed, and where impressions of a turned sheet land.
 *
 * Everything here is in bed coordinates, mm, origin at the bed's top left. The sheet is pushed into the registration corner, so
 * its left edge is 0 for a left corner and bed width − sheet width for a right one; likewise up and down. Turn t lays the sheet
 * turned clockwise by t · 360°/turns into the same corner; in the sheet as at turn 0 an impression p then lands on
 * c + R(−t · 360°/turns)(p − c), c the sheet's middle. A sheet's margin is the same all round, so what is inside it at one turn
 * is inside at every turn.
 */
import { rotatePoint } from '../geometry/transform.ts';
import type { Box, Point, Side } from '../geometry/types.ts';
import type { Platform, RunOrder, Setup } from './types.ts';

export interface SheetFrame {
  /** Where the sheet lies. */
  sheet: Box;
  /** Sheet less its margin: cut lines stay inside. */
  inner: Box;
  /** Lid area, as far as the sheet lies under it: ink stays inside. */
  ink: Box;
  lid: Box;
  centre: Point;
}

/** Square enough to be turned by a quarter: cutting is no better than this, mm. */
const SQUARE_MM = 0.01;
/** Rounding of inches and mm, mm. */
const ROUNDING_MM = 1e-6;

export function sheetFrame(order: Pick<RunOrder, 'sheet' | 'platform'>): SheetFrame {
  const { sheet: { widthMm, heightMm, marginMm }, platform } = order;
  const corner = platform.corner ?? 'top-left';
  const x = corner.endsWith('left') ? 0 : platform.widthMm - widthMm;
  const y = corner.startsWith('top') ? 0 : platform.heightMm - heightMm;
  const sheet = { x, y, w: widthMm, h: heightMm };
  const lid = lidArea(platform);
  return {
    sheet,
    inner: { x: x + marginMm, y: y + marginMm, w: widthMm - 2 * marginMm, h: heightMm - 2 * marginMm },
    ink: intersection(sheet, lid),
    lid,
    centre: { x: x + widthMm / 2, y: y + heightMm / 2 },
  };
}

export function lidArea(platform: Platform): Box {
  return platform.lid ?? { x: 0, y: 0, w: platform.widthMm, h: platform.heightMm };
}

/** Width and height can be negative: nothing is common. */
function intersection(a: Box, b: Box): Box {
  const x = Math.max(a.x, b.x), y = Math.max(a.y, b.y);
  return { x, y, w: Math.min(a.x + a.w, b.x + b.w) - x, h: Math.min(a.y + a.h, b.y + b.h) - y };
}

export function openSides(platform: Platform): Side[] {
  if (platform.openSides) return platform.openSides;
  const corner = platform.corner ?? 'top-left';
  const away: Side[] = [corner.endsWith('left') ? 'right' : 'left', corner.startsWith('top') ? 'bottom' : 'top'];
  return away.filter((side) => side !== (platform.hinge ?? 'left'));
}

/** Null where the sheet lies; else the words that say why not. */
export function lyingFault(order: Pick<RunOrder, 'sheet' | 'platform'>): string | null {
  const { sheet, platform } = order;
  const corner = platform.corner ?? 'top-left';
  const open = openSides(platform);
  const over = { x: corner.endsWith('left') ? 'right' : 'left', y: corner.startsWith('top') ? 'bottom' : 'top' } as const;
  if (sheet.widthMm > platform.widthMm + ROUNDING_MM && !open.includes(over.x)) return `The sheet is wider than the bed, and cannot hang over its ${over.x} side.`;
  if (sheet.heightMm > platform.heightMm + ROUNDING_MM && !open.includes(over.y)) return `The sheet is taller than the bed, and cannot hang over its ${over.y} side.`;
  if (sheet.widthMm <= 2 * sheet.marginMm || sheet.heightMm <= 2 * sheet.marginMm) return 'The margin leaves nothing of the sheet.';
  return null;
}

export function isSquare(sheet: RunOrder['sheet']): boolean {
  return Math.abs(sheet.widthMm - sheet.heightMm) <= SQUARE_MM;
}

/** Turns that a setup may have, fewest first; none where what is asked cannot be. */
export function allowedTurns(order: Pick<RunOrder, 'sheet' | 'turns'>): Setup['turns'][] {
  const square = isSquare(order.sheet);
  switch (order.turns) {
    case 'none': return [1];
    case 'half': return [2];
    case 'quarter': return square ? [4] : [];
    case 'auto': return square ? [1, 2, 4] : [1, 2];
  }
}

/** By how much an impression of turn t is turned clockwise in the sheet as at turn 0. */
export function impressionAngle(turn: number, turns: number): number {
  return turn === 0 ? 0 : (-turn * 360) / turns;
}

/** Where an impression made at p in turn t lies in the sheet as at turn 0. */
export function impressionPlace(p: Point, turn: number, turns: number, centre: Point): Point {
  return turn === 0 ? p : rotatePoint(p, impressionAngle(turn, turns), centre);
}
