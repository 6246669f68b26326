/**
 * What no plan can do better than: proven lower bounds of setups, presses, sheets, cut passes and minutes.
 *
 * They hold for every plan that keeps the order's rules, also one that spreads a line's count over several setups or sets more
 * copies of a stamp. Three arguments, of each the best:
 * counts — a press makes at most one label with each copy of a stamp, a sheet at most `turns` of them;
 * area — labels on one sheet, grown by half the gap, do not overlap and lie in the inner area grown as much (for convex A the area
 * grown by r is A + perimeter · r + πr², Steiner's formula);
 * conflicts — labels of which no two fit on one sheet together each need a sheet of their own: a clique of the conflict graph.
 * Dies: a pass cuts at most the owned copies of a die, and every sheet with something to cut needs a pass.
 */
import { distanceToConvex, noFitPolygon, perimeter } from '../geometry/convex.ts';
import { signedArea } from '../geometry/ring.ts';
import type { Box, Ring } from '../geometry/types.ts';
import { wanted } from './kinds.ts';
import type { Kind, Pose } from './kinds.ts';
import type { OrderShapes } from './place-geometry.ts';
import { DEFAULT_PACE } from './presses.ts';
import { allowedTurns } from './sheet-frame.ts';
import type { SheetFrame } from './sheet-frame.ts';
import type { RunLine, RunPlan } from './types.ts';

/** Sums of areas are rounded; a bound must not profit from it. */
const ROUNDING = 1e-9;

interface LineFacts { line: RunLine; count: number; kind: Kind; lineAt: number; grownAreaMm2: number; /** Most labels of it that one press makes. */ perPress: number }

export function lowerBounds(shapes: OrderShapes, frame: SheetFrame, kinds: readonly Kind[], pinnedSetups: number): RunPlan['atLeast'] {
  const { order } = shapes;
  const turns = allowedTurns(order);
  const mostTurns = Math.max(...turns), leastTurns = Math.min(...turns);
  const facts = kinds.flatMap((kind) => kind.lines.map((line, lineAt) => factsOf(shapes, kind, line, lineAt)));
  if (facts.length === 0) return { setups: pinnedSetups, presses: 0, sheets: 0, cutPasses: 0, minutes: 0 };

  const room = innerAreaMm2(frame, order.gapMm);
  const coverage = facts.reduce((sum, f) => sum + f.count * f.grownAreaMm2, 0) / room;
  const uses = stampUses(facts, shapes);
  const conflict = conflicts(shapes, frame, facts);

  const presses = Math.max(...uses.map(({ count, owned }) => Math.ceil(count / owned)), atLeastWhole(coverage * leastTurns), cliqueWeight(facts, conflict, (f, self) => (self ? f.count : Math.ceil(f.count / f.perPress))));
  const sheets = Math.max(
    Math.ceil(presses / mostTurns), atLeastWhole(coverage),
    cliqueWeight(facts, conflict, (f, self) => (self ? f.count : Math.ceil(f.count / (f.perPress * mostTurns)))),
  );
  const setups = Math.max(pinnedSetups, setupsAtLeast(shapes, facts, conflict, room, leastTurns));
  const cutPasses = passesAtLeast(shapes, facts, room, conflict, mostTurns);
  const pace = order.pace ?? DEFAULT_PACE;
  const inked = facts.reduce((n, f) => n + f.count * f.line.pieces.length, 0);
  const minutes = pace.setup * setups + pace.perStamp * stampsAtLeast(kinds) + pace.press * presses + pace.perInked * inked + pace.cutPass * cutPasses;
  return { setups, presses, sheets, cutPasses, minutes };
}

const atLeastWhole = (x: number): number => Math.ceil(x - ROUNDING);

function factsOf(shapes: OrderShapes, kind: Kind, line: RunLine, lineAt: number): LineFacts {
  const hull = shapes.dieHull(line.dieId), r = shapes.order.gapMm / 2;
  return { line, kind, lineAt, count: wanted(line), perPress: kind.copies, grownAreaMm2: Math.abs(signedArea(hull)) + perimeter(hull) * r + Math.PI * r * r };
}

/** The inner area grown by half the gap: rounded at its corners like the labels in it. */
function innerAreaMm2({ inner }: SheetFrame, gapMm: number): number {
  const r = gapMm / 2;
  return inner.w * inner.h + 2 * (inner.w + inner.h) * r + Math.PI * r * r;
}

function stampUses(facts: readonly LineFacts[], shapes: OrderShapes): { count: number; owned: number }[] {
  const uses = new Map<string, number>();
  for (const { line, count } of facts) for (const { stampId } of line.pieces) uses.set(stampId, (uses.get(stampId) ?? 0) + count);
  return [...uses].map(([id, count]) => ({ count, owned: shapes.stamp(id).owned }));
}

/** Every kind stands somewhere once; kinds that use one stamp may take turns with the copies they have, but each sets them down anew. */
function stampsAtLeast(kinds: readonly Kind[]): number {
  return kinds.reduce((n, kind) => n + [...kind.stamps.values()].reduce((m, k) => m + k, 0), 0);
}

/** conflict[i][k]: labels of lines i and k never lie on one sheet together; the diagonal: two of one line never do. */
function conflicts(shapes: OrderShapes, frame: SheetFrame, facts: readonly LineFacts[]): boolean[][] {
  const gap = shapes.order.gapMm;
  return facts.map((a, i) => facts.map((b, k) => k >= i && !somePairFits(frame, gap, a, b))).map((row, i, all) => row.map((value, k) => (k >= i ? value : all[k][i])));
}

/**
 * Whether labels of two lines fit on the sheet together in some pose, turned by any quarter (turned impressions stand at those
 * angles too). Both stand free in a box of positions; so does their difference, and since the no-fit polygon is convex, it
 * leaves room exactly where a corner of that box is clear of it.
 */
function somePairFits(frame: SheetFrame, gap: number, a: LineFacts, b: LineFacts): boolean {
  return hullsOf(a).some((p) => hullsOf(b).some((q) => {
    const from = positions(p, frame.inner), to = positions(q, frame.inner);
    if (!from || !to) return false;
    const noFit = noFitPolygon(p, q);
    const xs = [to.x - from.x - from.w, to.x + to.w - from.x], ys = [to.y - from.y - from.h, to.y + to.h - from.y];
    return xs.some((x) => ys.some((y) => distanceToConvex(noFit, x, y) >= gap - 1e-6));
  }));
}

function hullsOf({ kind, lineAt }: LineFacts): Ring[] {
  return kind.poses.flatMap((pose: Pose) => {
    const hull = pose.shape.labels[lineAt];
    return [hull, hull.map(({ x, y }) => ({ x: -y, y: x })), hull.map(({ x, y }) => ({ x: -x, y: -y })), hull.map(({ x, y }) => ({ x: y, y: -x }))];
  });
}

function positions(hull: Ring, inner: Box): Box | null {
  let left = Infinity, top = Infinity, right = -Infinity, bottom = -Infinity;
  for (const { x, y } of hull) [left, top, right, bottom] = [Math.min(left, x), Math.min(top, y), Math.max(right, x), Math.max(bottom, y)];
  const w = inner.w - (right - left), h = inner.h - (bottom - top);
  return w < -1e-6 || h < -1e-6 ? null : { x: inner.x - left, y: inner.y - top, w: Math.max(0, w), h: Math.max(0, h) };
}

/** Heaviest clique, grown greedily from each line in turn; any clique is a true bound. */
function cliqueWeight(facts: readonly LineFacts[], conflict: readonly boolean[][], weigh: (f: LineFacts, meetsItself: boolean) => number): number {
  const weights = facts.map((f, i) => weigh(f, conflict[i][i]));
  const byWeight = facts.map((_, i) => i).sort((i, k) => weights[k] - weights[i] || i - k);
  return byWeight.reduce((best, start) => {
    const clique = [start];
    for (const i of byWeight) if (i !== start && clique.every((k) => conflict[i][k])) clique.push(i);
    return Math.max(best, clique.reduce((sum, i) => sum + weights[i], 0));
  }, 0);
}

/** Kinds that never lie on one sheet can share no setup, nor can more kinds of one stamp than it has copies; and a setup's labels lie on the sheet side by side, in all its turns. */
function setupsAtLeast(shapes: OrderShapes, facts: readonly LineFacts[], conflict: readonly boolean[][], room: number, leastTurns: number): number {
  const first = facts.filter((f) => f.lineAt === 0);
  const rows = first.map((f) => facts.indexOf(f));
  const clique = cliqueWeight(first, rows.map((i) => rows.map((k) => conflict[i][k])), () => 1);
  const largest = new Map<Kind, number>();
  for (const f of facts) largest.set(f.kind, Math.max(largest.get(f.kind) ?? 0, f.grownAreaMm2));
  const area = [...largest.values()].reduce((sum, a) => sum + a, 0);
  const uses = new Map<string, number>();
  for (const kind of largest.keys()) for (const [id, n] of kind.stamps) uses.set(id, (uses.get(id) ?? 0) + n);
  const byStamp = [...uses].map(([id, n]) => Math.ceil(n / shapes.stamp(id).owned));
  return Math.max(1, clique, ...byStamp, atLeastWhole((area * leastTurns) / room));
}

function passesAtLeast(shapes: OrderShapes, facts: readonly LineFacts[], room: number, conflict: readonly boolean[][], mostTurns: number): number {
  const cut = facts.filter((f) => (f.line.cut ?? 'die') === 'die');
  if (cut.length === 0) return 0;
  const byDie = new Map<string, number>();
  for (const { line, count } of cut) byDie.set(line.dieId, (byDie.get(line.dieId) ?? 0) + count);
  const dies = Math.max(...[...byDie].map(([id, count]) => Math.ceil(count / shapes.order.dies.find((die) => die.id === id)!.owned)));
  const area = atLeastWhole(cut.reduce((sum, f) => sum + f.count * f.grownAreaMm2, 0) / room);
  const rows = cut.map((f) => facts.indexOf(f));
  const clique = cliqueWeight(cut, rows.map((i) => rows.map((k) => conflict[i][k])), (f, self) => (self ? f.count : Math.ceil(f.count / (f.perPress * mostTurns))));
  const perSheet = Math.max(...stampUses(cut, shapes).map(({ count, owned }) => Math.ceil(count / (owned * mostTurns))));
  return Math.max(dies, area, clique, perSheet);
}
