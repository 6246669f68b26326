/**
 * Grouping where no one gap serves the whole sheet: wide-set capitals may stand farther apart within than small sentiments do from one another.
 *
 * Input: links of the minimum spanning tree, the parts' outlines, one unit, and the gap that serves best; not mutated. Output: for each link, in the
 * order given, whether it is kept.
 *
 * The links in ascending order build a binary tree of groups, each born at its largest inner gap and swallowed at the gap to its neighbour. Of all
 * ways to choose sentiments from that tree, each part in one, the best is found from the leaves up. A group is worth the evidence for the links
 * in it (merge-evidence.ts), what it stands clear of its neighbour relative to its own largest gap or letter height, and a premium where the one gap would choose
 * it too; a group that breaks up costs the evidence for the link that held it. Only where the best choice beats the one gap by CLEARLY
 * does it take its place: on most sheets one gap serves. The benchmark compares both on sheets spaced by neighbours.
 * Cost: that of building the tree.
 */
import type { Outline } from '../geometry/types.ts';
import { clusterOf, mergeClusters, type Cluster } from './cluster.ts';
import { DisjointSets, type Link } from './gaps.ts';
import { evidence } from './merge-evidence.ts';

/** Natural logarithms of odds, chosen on the tuning half of the corpus. */
const EVIDENCE_LIMIT = 4, CLEARANCE_WORTH = 2, SAME_AS_ONE_GAP = 4, PER_SENTIMENT = 1, CLEARLY = 10;
/** Clearance beyond twice the inner gap says no more; a part alone counts as if it had an inner gap of this share of its letter height. */
const CLEARANCE_LIMIT = Math.log(2), LONE_PART = 0.3;
/** The whole sheet has no neighbour: as if it stood clear by this factor. */
const WHOLE_SHEET = 1.5;

interface Group { cluster: Cluster; born: number; swallowed: number; /** Of all links within. */ inside: number; joined: { link: number; odds: number; a: Group; b: Group } | null }
interface Choice { worth: number; cut: number[] }

export function keptLinks(links: readonly Link[], outlines: readonly Outline[], gap: number): boolean[] {
  const root = buildTree(links, outlines);
  const byOneGap = links.map((link) => link.distance <= gap);
  if (!root) return byOneGap;
  const best = choose(root, gap);
  if (best.worth - worthOfOneGap(root, gap) <= CLEARLY) return byOneGap;
  const cut = new Set(best.cut);
  return links.map((_, i) => !cut.has(i));
}

function buildTree(links: readonly Link[], outlines: readonly Outline[]): Group | null {
  const groups = outlines.map((outline): Group => ({ cluster: clusterOf(outline), born: 0, swallowed: Infinity, inside: 0, joined: null }));
  const sets = new DisjointSets(outlines.length);
  let root = groups[0] ?? null;
  for (const link of links.map((_, i) => i).sort((i, j) => links[i].distance - links[j].distance)) {
    const { a: from, b: to, distance } = links[link];
    const a = groups[sets.find(from)], b = groups[sets.find(to)];
    const odds = Math.min(EVIDENCE_LIMIT, Math.max(-EVIDENCE_LIMIT, evidence(a.cluster, b.cluster, distance)));
    a.swallowed = b.swallowed = distance;
    sets.join(from, to);
    root = groups[sets.find(from)] = { cluster: mergeClusters(a.cluster, b.cluster, distance), born: distance, swallowed: Infinity, inside: a.inside + b.inside + odds, joined: { link, odds, a, b } };
  }
  return root;
}

function worthAsOne(group: Group, gap: number): number {
  const inner = Math.max(group.born, LONE_PART * group.cluster.core);
  const outer = group.swallowed === Infinity ? WHOLE_SHEET * inner : group.swallowed;
  const sameAsOneGap = group.born <= gap && group.swallowed > gap ? SAME_AS_ONE_GAP : 0;
  return group.inside + CLEARANCE_WORTH * Math.min(CLEARANCE_LIMIT, Math.log(outer / inner)) + sameAsOneGap - PER_SENTIMENT;
}

function choose(group: Group, gap: number): Choice {
  const asOne = worthAsOne(group, gap);
  if (!group.joined) return { worth: asOne, cut: [] };
  const a = choose(group.joined.a, gap), b = choose(group.joined.b, gap), apart = a.worth + b.worth - group.joined.odds;
  return asOne >= apart ? { worth: asOne, cut: [] } : { worth: apart, cut: [...a.cut, ...b.cut, group.joined.link] };
}

function worthOfOneGap(group: Group, gap: number): number {
  if (!group.joined || group.born <= gap) return worthAsOne(group, gap);
  return worthOfOneGap(group.joined.a, gap) + worthOfOneGap(group.joined.b, gap) - group.joined.odds;
}
