/**
 * How likely two groups of ink parts, some gap apart, belong to one sentiment: what a person sees before measuring anything.
 *
 * Input: two clusters, standing level, and the true gap between them, one unit; not mutated. Output: the natural logarithm of the odds, free of
 * scale: above 0 speaks for one sentiment. Gaps count in letter heights, those of the smaller letters. Words on a line stand less than a letter's
 * height apart and on the same feet; lines of one wording lie centred or aligned; a heart or a dot is small; what makes the common box
 * mostly air is a neighbour. Likeness of type is left out on purpose: many stamps mix types, and many sheets have but one.
 * Cost: constant.
 */
import { unionBox, type Cluster } from './cluster.ts';

/**
 * Logistic regression on the tuning half of the made corpus (tests/benchmarks/corpus), inner and outer links weighed alike, ridge 3.
 * Order: constant, log gap, its square, beside, stacked, beside × log gap, stacked × log gap, unaligned, within, air, log of gap over the
 * largest gap inside, a letter or ornament, feet at different levels, narrower width over wider, log of the fewer parts.
 */
const WEIGHTS = [4.85, -2.84, 2.24, 1.88, 1.46, -3.08, -0.9, -0.64, 1.78, -2.2, -1.73, 5.37, -1.57, 1.08, -3.16];
/** Gaps beyond four letter heights, and within a fiftieth of one, say no more than those. */
const MOST_LOG_GAP = 1.4, LEAST_GAP = 0.02;
/** Shares of overlap that make groups stand beside each other, one above the other, or one within the other. */
const LEVEL_WITH = 0.4, WITHIN = 0.8;

export function evidence(a: Cluster, b: Cluster, gap: number): number {
  return features(a, b, gap).reduce((sum, value, i) => sum + WEIGHTS[i] * value, 0);
}

function features(a: Cluster, b: Cluster, gap: number): number[] {
  const core = Math.min(a.core, b.core), union = unionBox(a.box, b.box);
  const gapCores = Math.max(gap / core, LEAST_GAP), logGap = Math.min(MOST_LOG_GAP, Math.log(gapCores));
  const overlapX = overlap(a.box.x, a.box.w, b.box.x, b.box.w), overlapY = overlap(a.box.y, a.box.h, b.box.y, b.box.h);
  const within = Math.min(overlapX, overlapY) > WITHIN ? 1 : 0;
  const beside = within === 0 && overlapY > LEVEL_WITH && overlapY > overlapX ? 1 : 0;
  const stacked = within === 0 && overlapX > LEVEL_WITH && overlapX >= overlapY ? 1 : 0;
  const narrower = Math.max(Math.min(a.box.w, b.box.w), core);
  const offCentre = Math.abs(a.box.x + a.box.w / 2 - b.box.x - b.box.w / 2), offLeft = Math.abs(a.box.x - b.box.x);
  const air = Math.log((union.w * union.h) / (a.box.w * a.box.h + b.box.w * b.box.h));
  const inner = Math.max(a.inner, b.inner, 0.1 * core);
  const [lesser, greater] = a.box.w * a.box.h > b.box.w * b.box.h ? [b, a] : [a, b];
  return [
    1, logGap, logGap * logGap,
    beside, stacked, beside * logGap, stacked * logGap,
    stacked * Math.min(1, Math.min(offCentre, offLeft) / narrower),
    within, Math.min(2, Math.max(0, air)), Math.log((gapCores * core) / inner),
    isLetter(a, core) || isLetter(b, core) ? 1 : 0,
    beside * Math.min(1.5, Math.abs(a.box.y + a.box.h - b.box.y - b.box.h) / core),
    Math.min(1, lesser.box.w / greater.box.w), Math.log(1 + Math.min(a.parts, b.parts)),
  ];
}

/** One part no larger than a letter, dot or small ornament beside type of this height. */
function isLetter(cluster: Cluster, core: number): boolean {
  return cluster.parts === 1 && cluster.box.w < 1.5 * core && cluster.box.h < 2 * core;
}

/** Share of the shorter of two spans that the other covers. */
function overlap(from: number, length: number, otherFrom: number, otherLength: number): number {
  const shared = Math.min(from + length, otherFrom + otherLength) - Math.max(from, otherFrom);
  return Math.max(0, shared) / Math.max(1e-9, Math.min(length, otherLength));
}
