/**
 * How a reading stands against the truth. Every part belongs to the true sentiment whose ink it lies on. A true sentiment is found where one reading
 * holds parts of it and of no other; split where several do; missed where none does. A read sentiment is joined where it holds
 * parts of several true ones, false where of none.
 */
import { outlineBox } from '../../../server/engine/geometry/ring.ts';
import { boxDistance } from '../../../server/engine/reading/gaps.ts';
import { applyHomography, type Homography } from '../../../server/engine/reading/homography.ts';
import type { Box } from '../../../server/engine/geometry/types.ts';
import type { Reading } from '../../../server/engine/reading/types.ts';
import type { TrueSentiment } from './sheet-maker.ts';

export interface Score {
  truths: number; found: number; missed: number; split: number; joined: number; false: number;
  /** Of found ones, width and height apart. */
  sizeErrorsMm: number[];
}
export interface FoundGroup { boxesPx: Box[]; widthMm: number | null; heightMm: number | null }

/** A part farther than this from all true ink is on none. */
const NEAR_MM = 0.6;

export function groupsOf(reading: Reading): FoundGroup[] {
  const byId = new Map(reading.parts.map((part) => [part.id, part.boxPx]));
  return reading.sentiments.map((s) => ({ boxesPx: s.partIds.map((id) => byId.get(id)!), widthMm: s.widthMm, heightMm: s.heightMm }));
}

export function scoreGroups(groups: readonly FoundGroup[], truth: readonly TrueSentiment[], toSheet: Homography): Score {
  const owners = groups.map((group) => new Set(group.boxesPx.map((box) => ownerOf(box, truth, toSheet)).filter((o) => o >= 0)));
  const score: Score = { truths: truth.length, found: 0, missed: 0, split: 0, joined: 0, false: 0, sizeErrorsMm: [] };
  owners.forEach((set) => { if (set.size > 1) score.joined++; if (set.size === 0) score.false++; });
  truth.forEach((sentiment, t) => {
    const holding = owners.flatMap((set, g) => (set.has(t) ? [g] : []));
    if (holding.length === 0) score.missed++;
    else if (holding.length > 1) score.split++;
    else if (owners[holding[0]].size === 1) {
      score.found++;
      const { widthMm, heightMm } = groups[holding[0]];
      if (widthMm !== null && heightMm !== null) score.sizeErrorsMm.push(Math.abs(widthMm - sentiment.box.w), Math.abs(heightMm - sentiment.box.h));
    }
  });
  return score;
}

function ownerOf(boxPx: Box, truth: readonly TrueSentiment[], toSheet: Homography): number {
  const middle = applyHomography(toSheet, { x: boxPx.x + boxPx.w / 2, y: boxPx.y + boxPx.h / 2 });
  const a = applyHomography(toSheet, { x: boxPx.x, y: boxPx.y }), b = applyHomography(toSheet, { x: boxPx.x + boxPx.w, y: boxPx.y + boxPx.h });
  const box = { x: Math.min(a.x, b.x), y: Math.min(a.y, b.y), w: Math.abs(b.x - a.x), h: Math.abs(b.y - a.y) };
  let owner = -1, nearest = NEAR_MM;
  truth.forEach((sentiment, t) => {
    if (boxDistance(sentiment.box, { x: middle.x, y: middle.y, w: 0, h: 0 }) > 2) return;
    for (const ring of sentiment.rings) {
      const ink = outlineBox({ rings: [ring] });
      // Agreement of the part's box with the box of a ring, or of a whole run of joined letters.
      const off = Math.max(Math.abs(ink.x - box.x), Math.abs(ink.y - box.y), Math.abs(ink.x + ink.w - box.x - box.w), Math.abs(ink.y + ink.h - box.y - box.h));
      const apart = Math.min(off, boxDistance(ink, { x: middle.x, y: middle.y, w: 0, h: 0 }) + 0.01);
      if (apart < nearest) { nearest = apart; owner = t; }
    }
  });
  return owner;
}

export function addScores(scores: readonly Score[]): Score {
  const sum = (key: 'truths' | 'found' | 'missed' | 'split' | 'joined' | 'false') => scores.reduce((n, s) => n + s[key], 0);
  return { truths: sum('truths'), found: sum('found'), missed: sum('missed'), split: sum('split'), joined: sum('joined'), false: sum('false'), sizeErrorsMm: scores.flatMap((s) => s.sizeErrorsMm) };
}
