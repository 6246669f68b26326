/**
 * Turns rings so that filling by the non-zero rule, the only one that the PDF writer has, fills what even-odd would.
 *
 * For rings that do not cross: a ring inside an even number of others runs one way, the rest the other. O(n²) in boxes, and points only where a box lies in
 * another. Nothing is mutated. A ring of no area keeps its direction.
 */
import { ringBox, ringContains, signedArea } from '../geometry/ring.ts';
import type { Point, Ring } from '../geometry/types.ts';

/** A point is taken this far inside a ring, so that it is not on the edge of one that touches it, mm. */
const INSIDE_MM = 1e-3;

export function evenOddAsNonZero(rings: readonly Ring[]): Ring[] {
  if (rings.length === 1) return [rings[0]];
  const boxes = rings.map(ringBox);
  return rings.map((ring, i) => {
    const p = justInside(ring);
    const depth = rings.reduce((n, other, k) => {
      if (k === i) return n;
      const { x, y, w, h } = boxes[k];
      return p.x >= x && p.y >= y && p.x <= x + w && p.y <= y + h && ringContains(other, p) ? n + 1 : n;
    }, 0);
    return signedArea(ring) > 0 === (depth % 2 === 0) ? ring : [...ring].reverse();
  });
}

/** Beside the middle of the longest edge, which is the least likely to have another close by. */
function justInside(ring: Ring): Point {
  let best = 0, longest = -1;
  for (let i = 0; i < ring.length; i++) {
    const a = ring[i], b = ring[(i + 1) % ring.length];
    const length = Math.hypot(b.x - a.x, b.y - a.y);
    if (length > longest) { longest = length; best = i; }
  }
  const a = ring[best], b = ring[(best + 1) % ring.length];
  if (longest <= 0) return a;
  // Clockwise as seen on the page (positive area, y down) has its inside at the right of the way.
  const side = (signedArea(ring) > 0 ? INSIDE_MM : -INSIDE_MM) / longest;
  return { x: (a.x + b.x) / 2 - (b.y - a.y) * side, y: (a.y + b.y) / 2 + (b.x - a.x) * side };
}
