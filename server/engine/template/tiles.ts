/**
 * A drawing that is larger than the paper, cut into windows that overlap, with crosses that stand at the same place of the drawing on both
 * neighbours: laid on each other they give back the whole.
 *
 * Input: the region of the drawing and the room on a page; output: windows in the drawing's coordinates, row by row, and the marks. A room that takes
 * the region gives one window. Throws where the room is no wider than the overlap.
 */
import type { Box } from '../geometry/types.ts';
import { letterOf } from './labels.ts';
import { cross, FINE_MM, INK, line, PALE, words } from './page-items.ts';
import type { PageItem } from './types.ts';

/** Enough for a cross and a strip of tape, mm. */
export const OVERLAP_MM = 12;
const CROSS_ARM_MM = 3.5;
const LEAD_MM = 4;

export interface Tile { row: number; column: number; window: Box }

export function tilesOf(region: Box, room: { w: number; h: number }): { tiles: Tile[]; marks: PageItem[] } {
  const columns = starts(region.x, region.w, room.w), rows = starts(region.y, region.h, room.h);
  const tiles = rows.flatMap((y, row) => columns.map((x, column) => ({ row, column, window: { x, y, w: room.w, h: room.h } })));
  return { tiles, marks: joinMarks(columns, rows, room) };
}

function starts(from: number, length: number, room: number): number[] {
  if (room <= OVERLAP_MM) throw new RangeError(`Tiles of ${room} mm cannot overlap by ${OVERLAP_MM} mm.`);
  const count = Math.max(1, Math.ceil((length - OVERLAP_MM) / (room - OVERLAP_MM)));
  // What the tiles have over goes to the end, but for a little that keeps the drawing off the first edge.
  const spare = count * room - (count - 1) * OVERLAP_MM - length;
  const before = Math.min(spare / 2, LEAD_MM);
  return Array.from({ length: count }, (_, i) => from - before + i * (room - OVERLAP_MM));
}

function joinMarks(columns: readonly number[], rows: readonly number[], room: { w: number; h: number }): PageItem[] {
  const marks: PageItem[] = [];
  let count = 0;
  const mark = (x: number, y: number) => {
    marks.push(
      cross({ x, y }, CROSS_ARM_MM, 'join-mark', { strokeMm: FINE_MM, stroke: INK }),
      words({ x: x + 0.8, y: y - 0.8 }, letterOf(count++), 2.6, 'join-mark', { bold: true }),
    );
  };
  const seam = { strokeMm: 0.1, stroke: PALE, dashMm: [1, 2] };
  const right = columns[columns.length - 1] + room.w, bottom = rows[rows.length - 1] + room.h;
  for (const x of columns.slice(1)) {
    const middle = x + OVERLAP_MM / 2;
    marks.push(line(middle, rows[0], middle, bottom, 'join-mark', seam));
    // Clear of the strips that lie on rows above and below, so that each cross is on two tiles only.
    for (const y of rows) for (const at of [y + OVERLAP_MM + 2 * CROSS_ARM_MM, y + room.h - OVERLAP_MM - 2 * CROSS_ARM_MM]) mark(middle, at);
  }
  for (const y of rows.slice(1)) {
    const middle = y + OVERLAP_MM / 2;
    marks.push(line(columns[0], middle, right, middle, 'join-mark', seam));
    for (const x of columns) for (const at of [x + OVERLAP_MM + 2 * CROSS_ARM_MM, x + room.w - OVERLAP_MM - 2 * CROSS_ARM_MM]) mark(at, middle);
  }
  return marks;
}
