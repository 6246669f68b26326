/**
 * What stands in a label and what gives it its edge: several stamps put together into one artwork, the outline of a label that
 * no die cuts, and the places of the single stamps in the label once the whole of them has its place. Lengths mm.
 */
import type { BatchLine } from '../../contract/batches.ts';
import type { DieGeometry } from '../../engine/fit/types.ts';
import { boxCentre, outlineBox } from '../../engine/geometry/ring.ts';
import { rotatePoint, translateOutline } from '../../engine/geometry/transform.ts';
import type { Outline, Point } from '../../engine/geometry/types.ts';

export type Arrangement = Pick<BatchLine, 'arrangement' | 'align' | 'pieceGapMm'>;

/** All stamps as one artwork, whose box starts at 0, 0; `centres` are the middles of the single boxes in it. */
export interface Composed { artwork: Outline; centres: Point[]; centre: Point }

export function compose(artworks: readonly Outline[], { arrangement, align, pieceGapMm }: Arrangement): Composed {
  const boxes = artworks.map(outlineBox);
  const under = arrangement === 'under';
  const across = Math.max(...boxes.map((box) => (under ? box.w : box.h)));
  let along = 0;
  const placed = artworks.map((artwork, i) => {
    const box = boxes[i];
    const room = across - (under ? box.w : box.h);
    const aside = align === 'start' ? 0 : align === 'end' ? room : room / 2;
    const at = under ? { x: aside, y: along } : { x: along, y: aside };
    along += (under ? box.h : box.w) + pieceGapMm;
    return { outline: translateOutline(artwork, at.x - box.x, at.y - box.y), centre: { x: at.x + box.w / 2, y: at.y + box.h / 2 } };
  });
  const artwork = { rings: placed.flatMap(({ outline }) => outline.rings) };
  return { artwork, centres: placed.map(({ centre }) => centre), centre: boxCentre(outlineBox(artwork)) };
}

/** Where each stamp's middle lies in the label, when the whole artwork is turned about its middle and that lies at `centre`. */
export function pieceCentres(composed: Composed, place: { centre: Point; rotationDeg: number }): Point[] {
  return composed.centres.map((c) => {
    const turned = rotatePoint({ x: c.x - composed.centre.x, y: c.y - composed.centre.y }, place.rotationDeg);
    return { x: place.centre.x + turned.x, y: place.centre.y + turned.y };
  });
}

/** A label without a die: the ink's box and the same border all round. */
export function borderedLabel(artwork: Outline, borderMm: number): { geometry: DieGeometry; centre: Point } {
  const { w, h } = outlineBox(artwork);
  const widthMm = w + 2 * borderMm, heightMm = h + 2 * borderMm;
  return { geometry: { shape: { kind: 'rectangle', widthMm, heightMm } }, centre: { x: widthMm / 2, y: heightMm / 2 } };
}
