/**
 * What a person wishes of a reading (scale, grouping gap, corrections) and how each correction changes that. Pure: every
 * function answers new wishes, so that undo is a matter of keeping the old ones. Places are picture px.
 */
import type { Scale } from '../../server/contract/stamp-sets.ts';
import { insidePoint } from '../../server/engine/geometry/inside-point.ts';
import { outlineContains } from '../../server/engine/geometry/ring.ts';
import type { Box, Point } from '../../server/engine/geometry/types.ts';
import { applyScale, regroup } from '../../server/engine/reading/grouping.ts';
import type { Corrections, Reading, ReadPart, ReadSentiment } from '../../server/engine/reading/types.ts';

export interface Wishes { scale: Scale; groupingGap: 'auto' | number; corrections: Corrections }

/** Rounding of the places that are sent, px. */
const PLACE_PX = 100;
const place = (p: Point): Point => ({ x: Math.round(p.x * PLACE_PX) / PLACE_PX, y: Math.round(p.y * PLACE_PX) / PLACE_PX });

export function scaledReading(base: Reading, scale: Scale): Reading {
  if (scale.kind === 'file') return base;
  if (scale.kind === 'typed') return applyScale(base, { dpi: scale.dpi });
  if (scale.kind === 'ruler') return applyScale(base, { ruler: { from: scale.from, to: scale.to, lengthMm: scale.lengthMm } });
  return applyScale(base, { sheet: { cornersPx: scale.cornersPx, widthMm: scale.widthMm, heightMm: scale.heightMm } });
}

/** The reading as wished, and the sentiments that are set aside from it. */
export function wishedReading(scaled: Reading, { groupingGap, corrections }: Wishes): { reading: Reading; aside: ReadSentiment[]; asideParts: ReadPart[] } {
  const reading = regroup(scaled, groupingGap, corrections);
  if (corrections.setAside.length === 0) return { reading, aside: [], asideParts: [] };
  const everything = regroup(scaled, groupingGap, { ...corrections, setAside: [] });
  const kept = new Set(reading.sentiments.flatMap(({ partIds }) => partIds));
  return { reading, aside: everything.sentiments.filter(({ partIds }) => !partIds.some((id) => kept.has(id))), asideParts: everything.parts };
}

const correct = (wishes: Wishes, change: Partial<Corrections>): Wishes => ({ ...wishes, corrections: { ...wishes.corrections, ...change } });
const partsOf = (sentiment: ReadSentiment, parts: readonly ReadPart[]) => sentiment.partIds.map((id) => parts.find((part) => part.id === id)!).filter(Boolean);

/** Named by the largest part of each: it is the surest to be found again. */
export function joinSentiments(wishes: Wishes, sentiments: readonly ReadSentiment[], parts: readonly ReadPart[]): Wishes {
  const points = sentiments.map((sentiment) => {
    const largest = partsOf(sentiment, parts).reduce((a, b) => (b.areaPx2 > a.areaPx2 ? b : a));
    return place(insidePoint(largest.outlinePx));
  });
  return correct(wishes, { joins: [...wishes.corrections.joins, points] });
}

export function cutAlong(wishes: Wishes, from: Point, to: Point): Wishes {
  return correct(wishes, { splits: [...wishes.corrections.splits, { from: place(from), to: place(to) }] });
}

export function setAside(wishes: Wishes, sentiments: readonly ReadSentiment[], parts: readonly ReadPart[]): Wishes {
  const points = sentiments.flatMap((sentiment) => partsOf(sentiment, parts).map((part) => place(insidePoint(part.outlinePx))));
  return correct(wishes, { setAside: [...wishes.corrections.setAside, ...points] });
}

export function takeBack(wishes: Wishes, sentiment: ReadSentiment, parts: readonly ReadPart[]): Wishes {
  const own = new Set(sentiment.partIds);
  return correct(wishes, { setAside: wishes.corrections.setAside.filter((point) => !own.has(nearestPart(point, parts))) });
}

function nearestPart(point: Point, parts: readonly ReadPart[]): number {
  const inside = parts.find((part) => inBox(point, part.boxPx) && outlineContains(part.outlinePx, point));
  if (inside) return inside.id;
  return parts.reduce((best, part) => (boxDistanceSq(point, part.boxPx) < boxDistanceSq(point, best.boxPx) ? part : best)).id;
}

const inBox = (p: Point, b: Box) => p.x >= b.x && p.x <= b.x + b.w && p.y >= b.y && p.y <= b.y + b.h;
const boxDistanceSq = (p: Point, b: Box) => Math.max(b.x - p.x, 0, p.x - b.x - b.w) ** 2 + Math.max(b.y - p.y, 0, p.y - b.y - b.h) ** 2;

export type CorrectionKind = keyof Corrections;
export function removeCorrection(wishes: Wishes, kind: CorrectionKind, index: number): Wishes {
  return correct(wishes, { [kind]: wishes.corrections[kind].filter((_, i) => i !== index) });
}

/** The gap keeps its width in the picture when the scale changes; its unit changes from px to mm and back. */
export function changeScale(wishes: Wishes, scale: Scale, base: Reading): Wishes {
  if (wishes.groupingGap === 'auto') return { ...wishes, scale };
  const before = scaledReading(base, wishes.scale).mmPerPx, after = scaledReading(base, scale).mmPerPx;
  return { ...wishes, scale, groupingGap: (wishes.groupingGap / (before ?? 1)) * (after ?? 1) };
}

/** Whatever the order of their keys: the database has one of its own. */
export const sameWishes = (a: Wishes, b: Wishes): boolean => inOrder(a) === inOrder(b);
const inOrder = (value: unknown): string => JSON.stringify(value, (_key, part: unknown) => (
  part !== null && typeof part === 'object' && !Array.isArray(part) ? Object.fromEntries(Object.entries(part).sort(([p], [q]) => (p < q ? -1 : 1))) : part
));
