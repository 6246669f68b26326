/**
 * Which places stand in which setup: drafts of a whole run, and what they cost.
 *
 * A draft is made by filling one setup after the other with the kinds that are left, in some order of preference; then it may be
 * mended: more copies of the stamp that is pressed most, a setup dissolved into the others. Counts are shared out so that the
 * presses of a setup are as few as its places allow. Nothing of the order is mutated.
 */
import { wanted } from './kinds.ts';
import type { Kind } from './kinds.ts';
import { labelBoxesOnSheet } from './layout.ts';
import { translateRing } from '../geometry/convex.ts';
import { packInOrder } from './packing.ts';
import type { Direction, PackingSpace, Placed } from './packing.ts';
import type { OrderShapes } from './place-geometry.ts';
import type { SetupDraft, Share } from './presses.ts';
import type { SheetFrame } from './sheet-frame.ts';
import { findStrips } from './strips.ts';
import type { Placement, RunLine, Setup } from './types.ts';

export interface DraftSetup {
  turns: Setup['turns'];
  placed: Placed[];
  /** Where only some of a kind's labels are made in this setup. */
  limits?: Map<Kind, number>;
}

/** Fills setups with the kinds left until none is left; null where one finds no place in an empty setup. */
export function fillSetups(spaceOf: (setup: number) => PackingSpace, pinned: readonly Placed[][], kinds: readonly Kind[], direction: Direction): DraftSetup[] | null {
  const setups: DraftSetup[] = [];
  const pinnedKinds = new Set(pinned.flat().map((place) => place.pose.kind));
  let left = kinds.filter((kind) => !pinnedKinds.has(kind));
  for (let i = 0; left.length > 0 || i < pinned.length; i++) {
    const space = spaceOf(i);
    const { placed, left: rest } = packInOrder(space, pinned[i] ?? [], left, direction);
    if (placed.length === 0 && rest.length === left.length) return null;
    setups.push({ turns: space.turns, placed });
    left = rest;
  }
  return setups;
}

/** Labels of each place of each setup, and so the presses of each. */
export function shareCounts(setups: readonly DraftSetup[]): Share[][] {
  const where = new Map<Kind, { setup: number; at: number[] }[]>();
  setups.forEach((setup, s) => setup.placed.forEach((place, i) => {
    const list = where.get(place.pose.kind) ?? [];
    if (list.at(-1)?.setup === s) list.at(-1)!.at.push(i);
    else list.push({ setup: s, at: [i] });
    where.set(place.pose.kind, list);
  }));
  const shares: Share[][] = setups.map((setup) => setup.placed.map(() => []));
  const presses = setups.map(() => 0);
  // Kinds that stand in one setup fix its presses; those in several then fill what is free.
  for (const [kind, list] of [...where].sort((a, b) => a[1].length - b[1].length)) {
    const counts = countsBySetup(kind, list, setups, presses);
    const queue = kind.lines.map((line) => ({ line, left: wanted(line) }));
    list.forEach(({ setup, at }, k) => {
      presses[setup] = Math.max(presses[setup], Math.ceil(counts[k] / at.length));
      at.forEach((place, c) => {
        const count = Math.floor(counts[k] / at.length) + (c < counts[k] % at.length ? 1 : 0);
        shares[setup][place] = take(queue, count);
      });
    });
  }
  return shares;
}

function countsBySetup(kind: Kind, list: { setup: number; at: number[] }[], setups: readonly DraftSetup[], presses: readonly number[]): number[] {
  let left = kind.demand;
  const counts = list.map(({ setup, at }) => {
    const count = Math.min(left, setups[setup].limits?.get(kind) ?? (list.length === 1 ? left : presses[setup] * at.length));
    left -= count;
    return count;
  });
  counts[0] += left;
  return counts;
}

function take(queue: { line: RunLine; left: number }[], count: number): Share {
  const share: Share = [];
  for (const row of queue) {
    const some = Math.min(row.left, count);
    if (some > 0) share.push({ lineId: row.line.id, count: some });
    row.left -= some;
    count -= some;
  }
  return share;
}

/** A setup as the plan shows it: ids, copies, strips. */
export function toSetupDraft(shapes: OrderShapes, frame: SheetFrame, { turns, placed }: DraftSetup, shares: readonly Share[]): SetupDraft {
  const used = new Map<string, Set<number>>();
  const ids = new Set(placed.flatMap((place) => (place.pin ? [place.pin.id] : [])));
  for (const { pin } of placed) for (const { stampId, copy } of pin?.stamps ?? []) copiesOf(used, stampId).add(copy);
  let nextId = 1;
  const placements = placed.map(({ pose, x, y, pin }): Placement => {
    const lineIds = pose.kind.lines.map((line) => line.id);
    if (pin) return { ...pin, lineIds: [...pin.lineIds, ...lineIds.filter((id) => !pin.lineIds.includes(id))] };
    while (ids.has(nextId)) nextId++;
    const stamps = pose.kind.lines[0].pieces.map(({ stampId }) => {
      const copies = copiesOf(used, stampId);
      let copy = 1;
      while (copies.has(copy)) copy++;
      copies.add(copy);
      return { stampId, copy };
    });
    return { id: nextId++, stamps, lineIds, x, y, rotationDeg: pose.shape.rotationDeg };
  });
  const boxes = labelBoxesOnSheet(frame, placed.flatMap(({ pose, x, y }) => pose.shape.labels.map((label) => translateRing(label, x, y))), turns);
  return { turns, placements, stripCuts: findStrips(shapes.order.sheet, boxes, shapes.order.maxFeedWidthMm).cuts, shares: [...shares] };
}

function copiesOf(used: Map<string, Set<number>>, stampId: string): Set<number> {
  const known = used.get(stampId) ?? new Set<number>();
  used.set(stampId, known);
  return known;
}

/** Further copies of the kinds that are pressed most, as far as stamps and room go; null where nothing was gained. */
export function addCopies(space: PackingSpace, setup: DraftSetup, counts: Map<Kind, number>, direction: Direction): DraftSetup | null {
  const copies = (kind: Kind, placed: readonly Placed[]) => placed.filter((place) => place.pose.kind === kind).length;
  let placed = setup.placed;
  for (;;) {
    const busiest = [...counts].reduce((most, [kind, count]) => Math.max(most, Math.ceil(count / copies(kind, placed))), 0);
    const short = [...counts].filter(([kind, count]) => Math.ceil(count / copies(kind, placed)) === busiest).map(([kind]) => kind);
    if (busiest < 2 || short.some((kind) => copies(kind, placed) >= kind.copies)) break;
    const more = packInOrder(space, placed, short, direction);
    if (more.left.length > 0) {
      const again = packInOrder(space, placed.filter((place) => place.pin), [...placed.filter((place) => !place.pin).map((place) => place.pose.kind), ...short], direction);
      if (again.left.length > 0) break;
      placed = again.placed;
    } else placed = more.placed;
  }
  return placed === setup.placed ? null : { ...setup, placed };
}
