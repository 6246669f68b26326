/**
 * A die's cut line and the area in it where ink may stand. Output in mm, in the box of the cut line, which starts at 0, 0; outer
 * rings of drawn shapes clockwise as seen on the page. Arcs are off by at most 0.02 mm (0.01 mm drawn, 0.01 mm offset). An own outline whose
 * rings cross is resolved even-odd. Throws, in the words of the form, on a die that cannot be drawn. Nothing is mutated.
 */
import { convexHull } from '../geometry/hull.ts';
import { insetOutline, tidyOutline } from '../geometry/offset.ts';
import { outlineArea, outlineBox, signedArea } from '../geometry/ring.ts';
import { translateOutline } from '../geometry/transform.ts';
import type { Outline, Ring } from '../geometry/types.ts';
import { checkDie } from './die-shapes.ts';
import { findCrossing, outlineDrawingFault } from './outline-check.ts';
import { shapeRings } from './shape-rings.ts';
import type { DieGeometry } from './types.ts';

export function dieOutline(die: DieGeometry): Outline {
  if (die.shape.kind === 'outline') return ownOutline(die.shape.outline);
  const fault = checkDie(die).at(0);
  if (fault) throw new RangeError(`${fault.message} (${fault.path} of ${JSON.stringify(die)})`);
  return { rings: shapeRings(die.shape) };
}

function ownOutline(outline: Outline): Outline {
  const fault = outlineDrawingFault(outline);
  if (fault !== null) throw new RangeError(fault);
  const rings = outline.rings.map(distinctRing).filter((ring) => signedArea(convexHull(ring)) > 0);
  const drawn = findCrossing({ rings }) === null ? { rings } : tidyOutline({ rings });
  if (drawn.rings.length === 0) throw new RangeError('The outline encloses no area.');
  const box = outlineBox(drawn);
  return translateOutline(drawn, -box.x, -box.y);
}

/** Several rings are possible; none where the inset leaves nothing. */
export function usableOutline(die: DieGeometry): Outline {
  return insetOutline(dieOutline(die), die.stitchInsetMm ?? 0);
}

export function dieAreaMm2(die: DieGeometry): number {
  return outlineArea(dieOutline(die));
}

/** Imported rings may repeat points, often the first at the end. */
function distinctRing(ring: Ring): Ring {
  return ring.filter((p, i) => {
    const before = ring[(i + ring.length - 1) % ring.length];
    return p.x !== before.x || p.y !== before.y;
  });
}
