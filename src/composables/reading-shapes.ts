/** Geometry of the reading made ready to draw: numbers in, path strings and places out. Pure; picture px. */
import { ringContains } from '../../server/engine/geometry/ring.ts';
import type { Box, Outline, Point } from '../../server/engine/geometry/types.ts';
import type { ReadPart, ReadSentiment } from '../../server/engine/reading/types.ts';

const figure = (value: number) => String(Math.round(value * 10) / 10);
const at = ({ x, y }: Point) => `${figure(x)} ${figure(y)}`;

export function outlinePath(outline: Outline): string {
  return outline.rings.filter((ring) => ring.length > 1).map((ring) => `M${ring.map(at).join('L')}Z`).join('');
}

/** All ink of a sentiment as one path. */
export function sentimentPath(sentiment: ReadSentiment, partsById: ReadonlyMap<number, ReadPart>): string {
  return sentiment.partIds.map((id) => partsById.get(id)).map((part) => (part ? outlinePath(part.outlinePx) : '')).join('');
}

export const openPath = (points: readonly Point[]): string => (points.length === 0 ? '' : `M${points.map(at).join('L')}`);
export const closedPath = (points: readonly Point[]): string => (points.length < 2 ? '' : `${openPath(points)}Z`);

export function grownBox(box: Box, by: number): Box {
  return { x: box.x - by, y: box.y - by, w: box.w + 2 * by, h: box.h + 2 * by };
}

/** Sentiments whose middle lies in the lasso, or whose box lies in it with all corners. */
export function inLasso(lasso: readonly Point[], sentiments: readonly { boxPx: Box }[]): number[] {
  const ring = [...lasso];
  return sentiments.flatMap(({ boxPx: { x, y, w, h } }, i) => {
    const corners = [{ x, y }, { x: x + w, y }, { x: x + w, y: y + h }, { x, y: y + h }];
    return ringContains(ring, { x: x + w / 2, y: y + h / 2 }) || corners.every((corner) => ringContains(ring, corner)) ? [i] : [];
  });
}

/** Of the boxes that a point lies in, the smallest: a heart inside a frame can be picked. */
export function sentimentAt(point: Point, sentiments: readonly { boxPx: Box }[], reach: number): number | null {
  let found: number | null = null;
  sentiments.forEach(({ boxPx }, i) => {
    const b = grownBox(boxPx, reach);
    const inside = point.x >= b.x && point.x <= b.x + b.w && point.y >= b.y && point.y <= b.y + b.h;
    const other = found === null ? null : sentiments[found].boxPx;
    if (inside && (other === null || boxPx.w * boxPx.h < other.w * other.h)) found = i;
  });
  return found;
}

/** A straight cut right across a box: upright at a share of its width, or level at a share of its height. */
export function cutAcross(box: Box, direction: 'upright' | 'level', share: number): { from: Point; to: Point } {
  // A little beyond the box, so that ink at its very edge is cut too.
  const over = 0.02 * Math.max(box.w, box.h) + 2;
  if (direction === 'upright') {
    const x = box.x + share * box.w;
    return { from: { x, y: box.y - over }, to: { x, y: box.y + box.h + over } };
  }
  const y = box.y + share * box.h;
  return { from: { x: box.x - over, y }, to: { x: box.x + box.w + over, y } };
}

export interface RulerTick { at: number; long: boolean; label: string | null }

/** Ticks of a ruler along an edge, in picture px from the picture's origin, for what is seen. */
export function rulerTicks(fromPx: number, toPx: number, pxPerUnit: number, screenPxPerUnit: number, steps: readonly number[]): RulerTick[] {
  // Labels need some 48 screen px, ticks some 6.
  const labelStep = steps.find((step) => step * screenPxPerUnit >= 48) ?? steps[steps.length - 1];
  const tickStep = steps.find((step) => step * screenPxPerUnit >= 6 && Number.isInteger(Math.round((labelStep / step) * 1e6) / 1e6)) ?? labelStep;
  const ticks: RulerTick[] = [];
  for (let i = Math.ceil(fromPx / pxPerUnit / tickStep); i * tickStep * pxPerUnit <= toPx; i++) {
    const value = i * tickStep, whole = value / labelStep;
    const long = Math.abs(whole - Math.round(whole)) < 1e-6;
    ticks.push({ at: value * pxPerUnit, long, label: long ? String(Math.round(value * 1000) / 1000) : null });
  }
  return ticks;
}
