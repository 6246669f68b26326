/** A label with its stamps, ready to draw: paths in the box of the cut line, mm. Pure. */
import { dieOutline, usableOutline } from '../../../server/engine/fit/die-outline.ts';
import type { DieGeometry } from '../../../server/engine/fit/types.ts';
import { boxCentre, outlineBox } from '../../../server/engine/geometry/ring.ts';
import { translateOutline } from '../../../server/engine/geometry/transform.ts';
import type { Outline, Point } from '../../../server/engine/geometry/types.ts';
import { outlinePath } from '../sheet/outline-path.ts';

export interface LabelPaths { cut: string; /** Where ink must stay inside; null where that is the cut line itself. */ stitch: string | null; widthMm: number; heightMm: number }

export function labelPaths(geometry: DieGeometry): LabelPaths {
  const cut = dieOutline(geometry);
  const box = outlineBox(cut);
  return { cut: outlinePath(cut), stitch: geometry.stitchInsetMm ? outlinePath(usableOutline(geometry)) : null, widthMm: box.w, heightMm: box.h };
}

/** About the middle of its box, so that a place is only a transform. */
export function artworkPath(artwork: Outline): string {
  const middle = boxCentre(outlineBox(artwork));
  return outlinePath(translateOutline(artwork, -middle.x, -middle.y));
}

export const placeTransform = ({ centre, rotationDeg }: { centre: Point; rotationDeg: number }): string => `translate(${centre.x} ${centre.y}) rotate(${rotationDeg})`;
