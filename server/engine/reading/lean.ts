/**
 * The lean of a sheet, from all baselines together.
 *
 * Input: sentiments as outlines on the true sheet, mm or any other unit with its `unit` size; not mutated. Output: one angle per sentiment, degrees clockwise as seen.
 *
 * Feet are the lowest places of strokes: letters stand with them on baselines. Of two feet of one sentiment that stand on the same
 * baseline the line through them leans as the sheet does. All pairs vote: an angle's score is the sum over pairs of how well they line up at that
 * angle, weighted by their distance, within the unevenness that type has by nature. The mode is found on a coarse grid and refined. The sheet's lean is
 * believed where the score falls off clearly towards 0; else it is 0. A sentiment's own lean is taken where it differs by more than OWN_LEAN_DEG and
 * its own feet tell so much more clearly. Cost: pairs of feet times angles tried.
 */
import type { Outline, Point } from '../geometry/types.ts';

const MAX_LEAN_DEG = 15;
const COARSE_DEG = 0.25;
/** Feet on one baseline stand within this share of their strokes' usual height of it. */
const UNEVENNESS = 0.06;
const MAX_FEET = 120;
/** A lean whose score is better than no lean by less than this share cannot be told from none. */
const CLEARLY_BETTER = 0.05;
const OWN_LEAN_DEG = 2;
const OWN_CLEARLY_BETTER = 0.5;

interface Pair { dx: number; dy: number; weight: number; width: number }

export function findLeans(sentiments: readonly Outline[][]): number[] {
  const pairs = sentiments.map(footPairs);
  const common = bestLean(pairs.flat());
  return pairs.map((own) => {
    if (own.length < 12) return common.angleDeg;
    const lean = bestLean(own);
    if (Math.abs(lean.angleDeg - common.angleDeg) <= OWN_LEAN_DEG) return common.angleDeg;
    return lean.score > (1 + OWN_CLEARLY_BETTER) * score(own, common.angleDeg) ? lean.angleDeg : common.angleDeg;
  });
}

function bestLean(pairs: readonly Pair[]): { angleDeg: number; score: number } {
  let best = { angleDeg: 0, score: score(pairs, 0) };
  const level = best.score;
  if (pairs.length === 0) return best;
  for (let step = COARSE_DEG, centre = 0, reach = MAX_LEAN_DEG; step > 0.004; reach = step, centre = best.angleDeg, step /= 5) {
    for (let angleDeg = centre - reach; angleDeg <= centre + reach + 1e-9; angleDeg += step) {
      const s = score(pairs, angleDeg);
      if (s > best.score) best = { angleDeg, score: s };
    }
  }
  return best.score > (1 + CLEARLY_BETTER) * level ? { ...best, angleDeg: Math.round(best.angleDeg * 1000) / 1000 } : { angleDeg: 0, score: level };
}

function score(pairs: readonly Pair[], angleDeg: number): number {
  const slope = Math.tan((angleDeg * Math.PI) / 180);
  let sum = 0;
  for (const { dx, dy, weight, width } of pairs) {
    const off = (dy - slope * dx) / width;
    if (off > -3 && off < 3) sum += weight * Math.exp(-off * off);
  }
  return sum;
}

function footPairs(parts: readonly Outline[]): Pair[] {
  const feet = parts.flatMap(feetOf);
  if (feet.length > MAX_FEET) feet.splice(0, feet.length, ...feet.filter((_, i) => i % Math.ceil(feet.length / MAX_FEET) === 0));
  const heights = parts.map(heightOf).sort((a, b) => a - b);
  const height = heights[heights.length >> 1] || 1, width = UNEVENNESS * height;
  const pairs: Pair[] = [];
  for (let i = 0; i < feet.length; i++) {
    for (let j = i + 1; j < feet.length; j++) {
      const dx = feet[j].x - feet[i].x, dy = feet[j].y - feet[i].y;
      // Nearer than a letter the feet of one stroke vote for its own shape.
      if (Math.abs(dx) > height && Math.abs(dy) < 0.35 * Math.abs(dx)) pairs.push({ dx, dy, weight: Math.abs(dx), width });
    }
  }
  return pairs;
}

function heightOf(part: Outline): number {
  const ys = part.rings[0].map((p) => p.y);
  return Math.max(...ys) - Math.min(...ys);
}

/** Lowest places of the outer edge: y grows towards them and shrinks after, with ink above. */
function feetOf(part: Outline): Point[] {
  const ring = part.rings[0], n = ring.length, feet: Point[] = [];
  const prominence = 0.15 * heightOf(part);
  for (let i = 0; i < n; i++) {
    const p = ring[i];
    if (ring[(i + n - 1) % n].y > p.y || ring[(i + 1) % n].y > p.y) continue;
    if (rises(ring, i, 1, prominence) && rises(ring, i, -1, prominence)) feet.push(p);
  }
  return feet;
}

/** Going on from a foot the edge climbs by `prominence` before it gets lower than the foot. */
function rises(ring: readonly Point[], i: number, step: 1 | -1, prominence: number): boolean {
  const n = ring.length;
  for (let k = 1; k < n; k++) {
    const y = ring[(i + step * k + n * k) % n].y;
    if (y > ring[i].y || (y === ring[i].y && step === 1)) return false;
    if (y < ring[i].y - prominence) return true;
  }
  return false;
}
