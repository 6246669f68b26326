/**
 * The gap at which a sheet's parts fall into sentiments best.
 *
 * Input: the links of the minimum spanning tree and the parts' outlines, one unit; not mutated. Output: a gap; links above it are to be cut.
 *
 * The largest step in the ascending row of links is not enough: letters stand four times nearer than words, while sentiments may stand hardly
 * farther apart than the lines of one. So every place in the row is weighed by three things: the evidence (merge-evidence.ts) for every link that
 * would be kept, against that for every link that would be cut, between the groups as they would then be; the step itself; and, against it,
 * the next two steps, since neighbours on a sheet stand about alike and a single short outer gap is more likely the wide gap of an ornament. Evidence of
 * one link is limited, so that nothing odd outweighs the rest of the sheet.
 * Cost: links × the places that have a step of at least LEAST_STEP.
 */
import type { Outline } from '../geometry/types.ts';
import { clusterOf, mergeClusters, type Cluster } from './cluster.ts';
import { DisjointSets, type Link } from './gaps.ts';
import { evidence } from './merge-evidence.ts';

/** Natural logarithm of the odds that one link may speak for. */
const EVIDENCE_LIMIT = 4;
/** What a step by the factor e is worth, and shares of that for the next two; chosen on the tuning half of the corpus. */
const STEP_WORTH = 30, NEXT_STEP = 1, NEXT_BUT_ONE = 0.5;
/** Longer steps say no more; shorter ones are no place to cut. */
const STEP_LIMIT = Math.log(2), LEAST_STEP = 0.04;
/** Nothing cut at all counts as a step of this size, and what follows the longest link as of this one. */
const WHOLE_SHEET_STEP = Math.log(1.25), BEYOND_LAST = 0.2;
/** Where no link is cut the gap shown lies this much above the longest. */
const ABOVE_LONGEST = 1.2;

export function autoGap(links: readonly Link[], outlines: readonly Outline[]): number {
  const sorted = [...links].sort((a, b) => a.distance - b.distance);
  const clusters = outlines.map(clusterOf), sets = new DisjointSets(outlines.length);
  if (sorted.length === 0) return Math.max(1e-6, ...clusters.map((c) => c.core));
  const plain = plainStep(sorted, clusters);
  if (plain !== null) return plain;
  const stepAfter = (k: number) => (k < sorted.length - 1 ? Math.min(STEP_LIMIT, Math.log(sorted[k + 1].distance / Math.max(sorted[k].distance, 1e-9))) : BEYOND_LAST);
  let kept = 0;
  let best = { score: -Infinity, gap: 0 };
  for (let k = 0; k < sorted.length; k++) {
    kept += limited(mergeAt(clusters, sets, sorted[k]));
    const last = k === sorted.length - 1, step = last ? WHOLE_SHEET_STEP : stepAfter(k);
    if (step < LEAST_STEP) continue;
    const next = last ? 0 : NEXT_STEP * stepAfter(k + 1) + NEXT_BUT_ONE * stepAfter(k + 2);
    const score = kept - cutEvidence(clusters, sets, sorted, k + 1) + STEP_WORTH * (step - next);
    if (score > best.score) best = { score, gap: last ? ABOVE_LONGEST * sorted[k].distance : Math.sqrt(sorted[k].distance * sorted[k + 1].distance) };
  }
  return best.gap;
}

/**
 * A sheet of few sentiments far apart needs no weighing, and has too few links for it: from one link to the next the gap grows by
 * CLEAR_STEP, to more than CLEAR_CORES letter heights, which no line of a wording keeps from the next.
 */
const CLEAR_STEP = 2.8, CLEAR_CORES = 1.5, TALL_RANK = 0.9;

function plainStep(sorted: readonly Link[], clusters: readonly Cluster[]): number | null {
  const cores = clusters.map(({ core }) => core).sort((a, b) => a - b), tall = cores[Math.floor(TALL_RANK * (cores.length - 1))];
  const k = sorted.findIndex(({ distance }, i) => i > 0 && distance > CLEAR_STEP * sorted[i - 1].distance && distance > CLEAR_CORES * tall);
  return k === -1 ? null : Math.sqrt(sorted[k - 1].distance * sorted[k].distance);
}

/** Merges the two groups of a link and tells the evidence that there was for it. */
function mergeAt(clusters: Cluster[], sets: DisjointSets, link: Link): number {
  const a = sets.find(link.a), b = sets.find(link.b);
  const odds = evidence(clusters[a], clusters[b], link.distance);
  sets.join(a, b);
  clusters[sets.find(a)] = mergeClusters(clusters[a], clusters[b], link.distance);
  return odds;
}

/** Evidence that the links from `first` on should have been kept. */
function cutEvidence(clusters: readonly Cluster[], sets: DisjointSets, sorted: readonly Link[], first: number): number {
  let sum = 0;
  for (let j = first; j < sorted.length; j++) sum += limited(evidence(clusters[sets.find(sorted[j].a)], clusters[sets.find(sorted[j].b)], sorted[j].distance));
  return sum;
}

function limited(odds: number): number {
  return Math.min(EVIDENCE_LIMIT, Math.max(-EVIDENCE_LIMIT, odds));
}
