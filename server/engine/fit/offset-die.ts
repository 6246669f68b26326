/**
 * Sisters of a traced or imported die: its outline at an even distance, outwards or inwards. Input mm; output starts at 0, 0, or null where
 * nothing is left. Parts that an inward offset leaves beside the largest are dropped: a die cuts one label. Holes stay
 * as they are, since a hole punched for a ribbon does not grow with its label. Nothing is mutated.
 */
import { growOutline, insetOutline, tidyOutline } from '../geometry/offset.ts';
import { outlineBox, ringContains, signedArea } from '../geometry/ring.ts';
import { translateOutline } from '../geometry/transform.ts';
import type { Outline, Ring } from '../geometry/types.ts';

/** A label smaller than this is none. */
const SMALLEST_AREA_MM2 = 1;

export function offsetDie(outline: Outline, byMm: number): Outline | null {
  if (!Number.isFinite(byMm)) throw new RangeError(`An offset is a length, not ${byMm}.`);
  const { outer, holes } = largestPart(tidyOutline(outline));
  if (outer === null) return null;
  const solid: Outline = { rings: [outer] };
  const { outer: moved } = largestPart(byMm < 0 ? insetOutline(solid, -byMm) : growOutline(solid, byMm));
  if (moved === null || Math.abs(signedArea(moved)) < SMALLEST_AREA_MM2) return null;
  const kept = { rings: [moved, ...holes.filter((hole) => hole.every((p) => ringContains(moved, p)))] };
  const box = outlineBox(kept);
  return translateOutline(kept, -box.x, -box.y);
}

/** The largest ring and the rings inside it. */
function largestPart({ rings }: Outline): { outer: Ring | null; holes: Ring[] } {
  let outer: Ring | null = null;
  for (const ring of rings) if (outer === null || Math.abs(signedArea(ring)) > Math.abs(signedArea(outer))) outer = ring;
  const largest = outer;
  return { outer: largest, holes: largest === null ? [] : rings.filter((ring) => ring !== largest && ringContains(largest, ring[0])) };
}
