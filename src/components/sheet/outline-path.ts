/** Outlines as the `d` of an SVG path, in mm. Pure. */
import type { Outline, Point } from '../../../server/engine/geometry/types.ts';

/** Rounded to a hundredth of a mm: finer than any screen shows, and half the text. */
const near = (n: number): string => String(Math.round(n * 100) / 100);

export function ringPath(ring: readonly Point[]): string {
  return ring.length === 0 ? '' : `M${ring.map((p) => `${near(p.x)} ${near(p.y)}`).join('L')}Z`;
}

/** Filled even-odd. */
export function outlinePath(outline: Outline): string {
  return outline.rings.map(ringPath).join('');
}
