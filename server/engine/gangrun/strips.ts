/**
 * Straight cuts that make a sheet narrow enough for the die-cutting machine, between the labels.
 *
 * Input: the sheet, the boxes of all labels of all turns in sheet coordinates (as at turn 0), the widest piece that the machine
 * takes. All cuts of a setup have one axis and cross no label. Only cuts at the ends of the free intervals matter: going as
 * far as the machine allows each time takes fewest cuts, and the widest piece left over says how much is missing where no cuts
 * do. Cost O(n log n).
 */
import type { Box } from '../geometry/types.ts';
import type { RunOrder, Setup } from './types.ts';

type Cuts = Setup['stripCuts'];
export interface Strips { cuts: Cuts; /** By how much the widest piece is too wide; 0 where the cuts do. */ missingMm: number }

/** Cuts may touch labels; rounding, mm. */
const TOUCH_MM = 1e-9;

export function findStrips(sheet: RunOrder['sheet'], labels: readonly Box[], maxFeedWidthMm: number | undefined): Strips {
  if (maxFeedWidthMm === undefined || Math.min(sheet.widthMm, sheet.heightMm) <= maxFeedWidthMm + TOUCH_MM) return { cuts: [], missingMm: 0 };
  const x = alongAxis('x', sheet.widthMm, labels.map((b) => [b.x, b.x + b.w]), maxFeedWidthMm);
  const y = alongAxis('y', sheet.heightMm, labels.map((b) => [b.y, b.y + b.h]), maxFeedWidthMm);
  if (x.missingMm !== y.missingMm) return x.missingMm < y.missingMm ? x : y;
  return y.cuts.length < x.cuts.length ? y : x;
}

function alongAxis(axis: 'x' | 'y', length: number, spans: [number, number][], feed: number): Strips {
  const blocked = merged(spans);
  const cuts: Cuts = [];
  let from = 0, missing = 0;
  while (length - from > feed + TOUCH_MM) {
    let at = lastFree(blocked, from + feed, from);
    if (at <= from + TOUCH_MM) {
      // No free line within reach: the next one beyond is the best there is, and the piece is too wide.
      at = firstFree(blocked, from + feed);
      if (at >= length - TOUCH_MM) at = length;
    }
    missing = Math.max(missing, at - from - feed);
    if (at >= length) break;
    cuts.push({ axis, atMm: at });
    from = at;
  }
  return { cuts, missingMm: missing > TOUCH_MM ? missing : 0 };
}

/** Spans that overlap become one; spans that only touch leave a line between them. */
function merged(spans: [number, number][]): [number, number][] {
  const sorted = [...spans].sort((a, b) => a[0] - b[0]);
  const out: [number, number][] = [];
  for (const [from, to] of sorted) {
    const last = out[out.length - 1];
    if (last && from < last[1] - TOUCH_MM) last[1] = Math.max(last[1], to);
    else out.push([from, to]);
  }
  return out;
}

function lastFree(blocked: [number, number][], at: number, after: number): number {
  for (const [from, to] of [...blocked].reverse()) if (at > from + TOUCH_MM && at < to - TOUCH_MM) return Math.max(from, after);
  return at;
}

function firstFree(blocked: [number, number][], at: number): number {
  for (const [from, to] of blocked) if (at > from + TOUCH_MM && at < to - TOUCH_MM) return to;
  return at;
}

/** Which piece between the cuts a label lies on, counted from the left or the top. */
export function stripOf(label: Box, cuts: Cuts): number {
  const middle = cuts[0]?.axis === 'y' ? label.y + label.h / 2 : label.x + label.w / 2;
  return cuts.filter((cut) => cut.atMm < middle).length;
}
