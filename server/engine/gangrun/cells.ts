/**
 * The parts of a sheet that labels stay in so that straight cuts pass between them: one where the machine takes the whole
 * sheet, else strips no wider than it takes. Bed coordinates. Cuts of a sheet that is laid in turned must lie the same way
 * round about its middle, so strips are then equal; for quarter turns they cross.
 */
import type { Box } from '../geometry/types.ts';
import type { SheetFrame } from './sheet-frame.ts';
import type { RunOrder, Setup } from './types.ts';

export interface CellChoice { cells: Box[] }

export function cellChoices(order: Pick<RunOrder, 'sheet' | 'maxFeedWidthMm'>, frame: SheetFrame, turns: Setup['turns']): CellChoice[] {
  const feed = order.maxFeedWidthMm;
  const { widthMm, heightMm } = order.sheet;
  if (feed === undefined || Math.min(widthMm, heightMm) <= feed) return [{ cells: [frame.inner] }];
  if (turns === 4) {
    const across = spans(widthMm, equalCuts(widthMm, feed)), down = spans(heightMm, equalCuts(heightMm, feed));
    return [{ cells: across.flatMap(([x0, x1]) => down.map(([y0, y1]) => part(frame, x0, x1, y0, y1))) }];
  }
  const cuts = (length: number) => [equalCuts(length, feed), ...(turns === 1 ? [fullCuts(length, feed)] : [])];
  return [
    ...cuts(widthMm).map((at) => ({ cells: spans(widthMm, at).map(([a, b]) => part(frame, a, b, 0, heightMm)) })),
    ...cuts(heightMm).map((at) => ({ cells: spans(heightMm, at).map(([a, b]) => part(frame, 0, widthMm, a, b)) })),
  ];
}

function equalCuts(length: number, feed: number): number[] {
  const pieces = Math.ceil(length / feed - 1e-9);
  return Array.from({ length: pieces - 1 }, (_, i) => (length * (i + 1)) / pieces);
}

/** As wide as the machine takes, the rest last. */
function fullCuts(length: number, feed: number): number[] {
  const cuts: number[] = [];
  for (let at = feed; at < length - 1e-9; at += feed) cuts.push(at);
  return cuts;
}

function spans(length: number, cuts: readonly number[]): [number, number][] {
  const edges = [0, ...cuts, length];
  return edges.slice(1).map((to, i) => [edges[i], to]);
}

/** Part of the sheet, less the margin where it lies at the sheet's edge. */
function part({ sheet, inner }: SheetFrame, x0: number, x1: number, y0: number, y1: number): Box {
  const left = Math.max(sheet.x + x0, inner.x), top = Math.max(sheet.y + y0, inner.y);
  const right = Math.min(sheet.x + x1, inner.x + inner.w), bottom = Math.min(sheet.y + y1, inner.y + inner.h);
  return { x: left, y: top, w: right - left, h: bottom - top };
}
