/**
 * The lean of a sheet, from all baselines together.
 *
 * Input: sentiments as lists of parts' outlines on the true sheet, any unit; not mutated. Output: one angle per sentiment, degrees clockwise
 * as seen; exactly 0 where the lean cannot be told from 0.
 *
 * Letters stand with their feet on baselines and reach with their heads to a common height. Of two feet (or two heads) of one sentiment that
 * stand on the same line, the straight line through them leans as the sheet does. All pairs vote: an angle's score is the sum over pairs of how well
 * they line up at that angle, the farther apart the more, within the unevenness that type has by nature; each sentiment's pairs count by
 * its number of feet, not its square. The best angle is found on a coarse grid and refined. How surely it is told follows from how
 * the sentiments disagree (the sandwich estimate of P. Huber, 1967).
 * A sentiment's own lean counts only where feet and heads, each alone, agree on it and it differs by more than OWN_LEAN_DEG.
 * Cost: pairs times angles tried.
 */
import type { Outline, Point } from '../geometry/types.ts';

const MAX_LEAN_DEG = 15;
const COARSE_DEG = 0.25, FINEST_DEG = 0.002;
/** Feet on one line stand within this share of their letters' usual height of it. */
const UNEVENNESS = 0.06;
/** Of long sentiments every second or third foot speaks. */
const MAX_FEET = 100;
/** A lean within this many standard errors of 0 is none; nor is one as small as the unevenness of type itself can feign. */
const SURE_ERRORS = 3, LEAST_LEAN_DEG = 0.08;
/** Feet of type drawn in pixels stand this share of one off, from one end of the widest sentiment to the other. */
const RESOLVED_PX = 0.6;
const OWN_LEAN_DEG = 2, OWN_AGREEMENT_DEG = 1;
/** How many times better feet and heads must line up at a sentiment's own lean than at the sheet's. */
const OWN_BETTER = 1.6;
const OWN_LEAST_FEET = 5;

interface Pair { dx: number; dy: number; weight: number; width: number }
interface Votes { feet: Pair[]; heads: Pair[]; count: number }

/** `resolution`: size of a pixel in the outlines' unit, below which feet cannot be told apart. */
export function findLeans(sentiments: readonly Outline[][], resolution = 0): number[] {
  const votes = sentiments.map(votesOf);
  const widest = Math.max(0, ...sentiments.map(widthOf));
  const leastDeg = widest > 0 ? Math.max(LEAST_LEAN_DEG, (Math.atan(RESOLVED_PX * resolution / widest) * 180) / Math.PI) : LEAST_LEAN_DEG;
  const common = surely(votes.map((v) => [...v.feet, ...v.heads]), leastDeg);
  return votes.map((own) => ownLean(own, common) ?? common);
}

function ownLean({ feet, heads, count }: Votes, common: number): number | null {
  if (count < OWN_LEAST_FEET) return null;
  const byFeet = bestLean(feet), byHeads = bestLean(heads);
  if (Math.abs(byFeet.angleDeg - byHeads.angleDeg) > OWN_AGREEMENT_DEG) return null;
  const both = bestLean([...feet, ...heads]);
  if (Math.abs(both.angleDeg - common) <= OWN_LEAN_DEG) return null;
  const clear = byFeet.score > OWN_BETTER * score(feet, common) && byHeads.score > OWN_BETTER * score(heads, common);
  return clear ? rounded(both.angleDeg) : null;
}

/** The lean common to all, or 0. */
function surely(votes: readonly Pair[][], leastDeg: number): number {
  const { angleDeg } = bestLean(votes.flat());
  const slope = Math.tan((angleDeg * Math.PI) / 180);
  let spread = 0, curvature = 0;
  for (const own of votes) {
    let pull = 0;
    for (const { dx, dy, weight, width } of own) {
      const off = (dy - slope * dx) / width, near = weight * Math.exp(-off * off), rate = dx / width;
      pull += 2 * near * off * rate;
      curvature += near * rate * rate * (4 * off * off - 2);
    }
    spread += pull * pull;
  }
  const errorDeg = curvature < 0 ? ((Math.sqrt(spread) / -curvature) * 180) / Math.PI : Infinity;
  return Math.abs(angleDeg) > Math.max(leastDeg, SURE_ERRORS * errorDeg) ? rounded(angleDeg) : 0;
}

function rounded(angleDeg: number): number {
  return Math.round(angleDeg * 1000) / 1000;
}

function bestLean(pairs: readonly Pair[]): { angleDeg: number; score: number } {
  let best = { angleDeg: 0, score: score(pairs, 0) };
  if (pairs.length === 0) return best;
  for (let step = COARSE_DEG, centre = 0, reach = MAX_LEAN_DEG; step > FINEST_DEG; reach = step, centre = best.angleDeg, step /= 5) {
    const steps = Math.round(reach / step);
    for (let k = -steps; k <= steps; k++) {
      const angleDeg = centre + k * step, s = score(pairs, angleDeg);
      if (s > best.score) best = { angleDeg, score: s };
    }
  }
  return best;
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

function votesOf(parts: readonly Outline[]): Votes {
  const letters = parts.filter((part) => !isRule(part));
  const heights = letters.map(heightOf).sort((a, b) => a - b);
  const height = heights[heights.length >> 1] || 1;
  const feet = letters.flatMap((part) => extremes(part, 1)), heads = letters.flatMap((part) => extremes(part, -1));
  const rules = parts.filter(isRule).map(endsOf);
  return { feet: [...pairsOf(feet, height), ...rules], heads: [...pairsOf(heads, height), ...rules], count: Math.min(feet.length, heads.length) };
}

/** Long and thin: a rule or a wave under words. It has no feet, but leans itself. */
function isRule(part: Outline): boolean {
  return heightOf(part) < RULE_SHARE * widthOf([part]);
}
const RULE_SHARE = 0.2;

function endsOf(part: Outline): Pair {
  const ring = part.rings[0], left = ring.reduce((a, b) => (b.x < a.x ? b : a)), right = ring.reduce((a, b) => (b.x > a.x ? b : a));
  return { dx: right.x - left.x, dy: right.y - left.y, weight: right.x - left.x, width: Math.max(UNEVENNESS * heightOf(part), 1e-3 * (right.x - left.x)) };
}

function widthOf(parts: readonly Outline[]): number {
  let left = Infinity, right = -Infinity;
  for (const part of parts) for (const { x } of part.rings[0]) { left = Math.min(left, x); right = Math.max(right, x); }
  return Math.max(0, right - left);
}

function pairsOf(all: readonly Point[], height: number): Pair[] {
  const every = Math.ceil(all.length / MAX_FEET), feet = all.filter((_, i) => i % every === 0);
  const pairs: Pair[] = [];
  for (let i = 0; i < feet.length; i++) {
    for (let j = i + 1; j < feet.length; j++) {
      const dx = feet[j].x - feet[i].x, dy = feet[j].y - feet[i].y;
      // Nearer than a letter the feet of one stroke vote for its own shape.
      if (Math.abs(dx) > height && Math.abs(dy) < 0.35 * Math.abs(dx)) pairs.push({ dx, dy, weight: Math.abs(dx) / feet.length, width: UNEVENNESS * height });
    }
  }
  return pairs;
}

function heightOf(part: Outline): number {
  let top = Infinity, bottom = -Infinity;
  for (const { y } of part.rings[0]) { top = Math.min(top, y); bottom = Math.max(bottom, y); }
  return bottom - top;
}

/** Lowest (`sense` 1) or highest (−1) places of the outer edge that stand out by a seventh of the part's height. */
function extremes(part: Outline, sense: 1 | -1): Point[] {
  const ring = part.rings[0], n = ring.length, found: Point[] = [];
  const prominence = 0.15 * heightOf(part);
  for (let i = 0; i < n; i++) {
    const y = sense * ring[i].y;
    if (sense * ring[(i + n - 1) % n].y > y || sense * ring[(i + 1) % n].y > y) continue;
    if (recedes(ring, i, 1, sense, prominence) && recedes(ring, i, -1, sense, prominence)) found.push(ring[i]);
  }
  return found;
}

/** Going on from an extreme the edge draws back by `prominence` before it goes beyond it. Of two level ends of a flat foot one counts. */
function recedes(ring: readonly Point[], i: number, step: 1 | -1, sense: 1 | -1, prominence: number): boolean {
  const n = ring.length, own = sense * ring[i].y;
  for (let k = 1; k < n; k++) {
    const y = sense * ring[(i + step * k + n * k) % n].y;
    if (y > own || (y === own && step === 1)) return false;
    if (y < own - prominence) return true;
  }
  return false;
}
