/**
 * Which dies run through the machine together: labels of one piece of paper shared out over as few passes as can be.
 *
 * In a pass no die is used more often than owned and no two dies, rims included, overlap. Labels of one piece are a graph whose
 * edges join dies that overlap; passes are its colours, each with room for a die's owned copies. Coloured greedily, the most
 * constrained label first (D. Brélaz, New methods to color the vertices of a graph, CACM 22, 1979). Never fewer than the most
 * labels of a die by its copies.
 */
import { convexSeparation } from '../geometry/convex.ts';
import { ringBox } from '../geometry/ring.ts';
import type { Ring } from '../geometry/types.ts';
import type { CutPass } from './types.ts';

export interface LabelToCut { dieId: string; lineId: string; placement: number; turn: number; hull: Ring; rimMm: number }

/** Rims may touch; rounding, mm. */
const TOUCH_MM = 1e-6;

export function cutPassesOf(labels: readonly LabelToCut[], owned: (dieId: string) => number): CutPass['cuts'][] {
  const meets = labels.map((a, i) => labels.map((b, k) => i !== k && diesMeet(a, b)));
  const pass = labels.map(() => -1);
  const used: Map<string, number>[] = [];
  const blocked = (i: number, p: number) => (used[p]?.get(labels[i].dieId) ?? 0) >= owned(labels[i].dieId) || labels.some((_, k) => pass[k] === p && meets[i][k]);
  const sameDie = countBy(labels.map((label) => label.dieId));

  for (let done = 0; done < labels.length; done++) {
    // Brélaz: the label with fewest passes left to it; then the one whose die is wanted most.
    let next = -1, worst = [-1, -1];
    labels.forEach((label, i) => {
      if (pass[i] >= 0) return;
      const rank = [used.filter((_, p) => blocked(i, p)).length, sameDie.get(label.dieId)! / owned(label.dieId) + meets[i].filter(Boolean).length];
      if (rank[0] > worst[0] || (rank[0] === worst[0] && rank[1] > worst[1])) [next, worst] = [i, rank];
    });
    let p = 0;
    while (p < used.length && blocked(next, p)) p++;
    if (p === used.length) used.push(new Map());
    pass[next] = p;
    used[p].set(labels[next].dieId, (used[p].get(labels[next].dieId) ?? 0) + 1);
  }
  return used.map((_, p) => {
    const copies = new Map<string, number>();
    return labels.filter((_, i) => pass[i] === p).map(({ dieId, lineId, placement, turn }) => {
      const dieCopy = (copies.get(dieId) ?? 0) + 1;
      copies.set(dieId, dieCopy);
      return { dieId, dieCopy, placement, turn, lineId };
    });
  });
}

function diesMeet(a: LabelToCut, b: LabelToCut): boolean {
  const room = a.rimMm + b.rimMm;
  const p = ringBox(a.hull), q = ringBox(b.hull);
  if (p.x + p.w + room <= q.x || q.x + q.w + room <= p.x || p.y + p.h + room <= q.y || q.y + q.h + room <= p.y) return false;
  return convexSeparation(a.hull, b.hull) < room - TOUCH_MM;
}

function countBy(keys: readonly string[]): Map<string, number> {
  const counts = new Map<string, number>();
  for (const key of keys) counts.set(key, (counts.get(key) ?? 0) + 1);
  return counts;
}
