/**
 * The gap at which a sheet's parts fall into sentiments best.
 *
 * Input: links of the minimum spanning tree and the parts' boxes, one unit; not mutated. Output: a gap; links above it are to be cut.
 * A gap between sentiments stands out from the gaps within them: of all places in the ascending row of links the one is taken where the
 * next link is most times longer, weighed by how likely such a gap is beside letters of this height.
 */
import type { Box } from '../geometry/types.ts';
import type { Link } from './gaps.ts';

/** Gaps between sentiments are about this many letter heights, give or take the spread (natural logarithm). */
const USUAL_GAP_HEIGHTS = 1.3, SPREAD = 0.8;

export function autoGap(links: readonly Link[], boxes: readonly Box[]): number {
  const heights = boxes.map((b) => b.h).sort((a, b) => a - b);
  const height = heights[heights.length >> 1] || 1;
  const gaps = links.map((l) => l.distance).sort((a, b) => a - b);
  if (gaps.length === 0) return height;
  // With nothing cut the whole sheet is one sentiment: right where no gap is wide for its letters.
  let best = { score: Math.log(1.6), gap: 1.3 * Math.max(gaps[gaps.length - 1], height) };
  for (let i = 0; i + 1 < gaps.length || i === 0; i++) {
    const inner = Math.max(gaps[i], 0.05 * height), outer = gaps[i + 1] ?? inner;
    const middle = Math.sqrt(inner * outer);
    const score = Math.log(outer / inner) - 0.5 * (Math.log(middle / (USUAL_GAP_HEIGHTS * height)) / SPREAD) ** 2;
    if (score > best.score) best = { score, gap: middle };
  }
  return best.gap;
}
