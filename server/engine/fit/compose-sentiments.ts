/**
 * Several sentiments as one artwork: under one another or side by side, at a gap, aligned. The whole is fitted as one; each piece stays one
 * physical stamp, whose place in the label comes from the fit of the whole (`piecePlaces`).
 * Lengths mm. The artwork starts at 0, 0. Gaps lie between the ink's boxes, so pieces never overlap. Nothing is mutated.
 */
import { boxCentre, outlineBox } from '../geometry/ring.ts';
import { rotatePoint, translateOutline } from '../geometry/transform.ts';
import type { Outline, Point } from '../geometry/types.ts';
import type { Fit } from './types.ts';

export interface CompositionOptions {
  direction: 'stacked' | 'side-by-side';
  /** Between neighbours' boxes; one for all, or one for each gap in order. */
  gapMm: number | number[];
  /** Across the direction: left or top, middle, right or bottom. Default middle. */
  align?: 'start' | 'middle' | 'end';
}
export interface Composition {
  artwork: Outline;
  /** Centre of each piece's box in the artwork, in the order given. */
  centres: Point[];
}

export function composeSentiments(pieces: readonly Outline[], { direction, gapMm, align = 'middle' }: CompositionOptions): Composition {
  if (pieces.length === 0) throw new RangeError('A combined sentiment needs at least one piece.');
  const boxes = pieces.map(outlineBox);
  const along = direction === 'stacked' ? 'h' : 'w', across = direction === 'stacked' ? 'w' : 'h';
  const widest = Math.max(...boxes.map((box) => box[across]));
  const share = { start: 0, middle: 0.5, end: 1 }[align];
  let at = 0;
  const placed = pieces.map((piece, i) => {
    if (i > 0) at += gapBefore(gapMm, i);
    const offset = (widest - boxes[i][across]) * share;
    const [x, y] = direction === 'stacked' ? [offset, at] : [at, offset];
    at += boxes[i][along];
    return translateOutline(piece, x - boxes[i].x, y - boxes[i].y);
  });
  return { artwork: { rings: placed.flatMap((piece) => piece.rings) }, centres: placed.map((piece) => boxCentre(outlineBox(piece))) };
}

function gapBefore(gapMm: number | number[], i: number): number {
  const gap = Array.isArray(gapMm) ? gapMm[i - 1] : gapMm;
  if (!(gap >= 0 && Number.isFinite(gap))) throw new RangeError(`A gap between pieces is a length of 0 or more, not ${gap}.`);
  return gap;
}

/** Where each piece stands in the box of the cut line, as a run order's line carries it. */
export function piecePlaces(composition: Composition, fit: Pick<Fit, 'centre' | 'rotationDeg'>): { centre: Point; rotationDeg: number }[] {
  const middle = boxCentre(outlineBox(composition.artwork));
  return composition.centres.map((c) => {
    const turned = rotatePoint({ x: c.x - middle.x, y: c.y - middle.y }, fit.rotationDeg);
    return { centre: { x: fit.centre.x + turned.x, y: fit.centre.y + turned.y }, rotationDeg: fit.rotationDeg };
  });
}
