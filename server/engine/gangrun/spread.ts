/**
 * Counts spread over setups: of three labels of which two fit, two of each are made in three presses, ab, bc, ac, not in four.
 *
 * Each setup takes the kinds of which most is left, as many as fit, and is pressed until the fullest kind outside is level with
 * the least inside (as in R. McNaughton, Scheduling with deadlines and loss functions, Management Science 6, 1959). Setups of the
 * same kinds are one.
 */
import type { Kind } from './kinds.ts';
import { packInOrder } from './packing.ts';
import type { Direction, PackingSpace } from './packing.ts';
import type { DraftSetup } from './setups.ts';

/** More setups than this nobody wants to set up. */
const MOST_SETUPS = 40;

export function spreadSetups(space: PackingSpace, kinds: readonly Kind[], direction: Direction): DraftSetup[] | null {
  const left = new Map(kinds.map((kind) => [kind, kind.demand]));
  const setups: (DraftSetup & { limits: Map<Kind, number> })[] = [];
  const open = () => [...left].filter(([, n]) => n > 0).sort((a, b) => b[1] - a[1] || a[0].index - b[0].index);
  for (let rest = open(); rest.length > 0; rest = open()) {
    if (setups.length >= MOST_SETUPS || space.budget.stopped()) return null;
    const { placed } = packInOrder(space, [], rest.map(([kind]) => kind), direction);
    if (placed.length === 0) return null;
    const inside = placed.map((place) => left.get(place.pose.kind)!);
    const outside = rest.filter(([kind]) => !placed.some((place) => place.pose.kind === kind)).map(([, n]) => n);
    const least = Math.min(...inside);
    const presses = outside.length === 0 ? Math.max(...inside) : Math.min(least, Math.max(space.turns, least - Math.max(...outside)));
    const limits = new Map(placed.map(({ pose: { kind } }) => [kind, Math.min(presses, left.get(kind)!)]));
    for (const [kind, n] of limits) left.set(kind, left.get(kind)! - n);
    const same = setups.find((setup) => setup.placed.length === placed.length && placed.every(({ pose }) => setup.limits.has(pose.kind)));
    if (same) for (const [kind, n] of limits) same.limits.set(kind, same.limits.get(kind)! + n);
    else setups.push({ turns: space.turns, placed, limits });
  }
  return setups;
}
