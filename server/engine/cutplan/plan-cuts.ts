/**
 * How parts are cut from stock sheets: guillotine cuts, told in the order in which they are made.
 *
 * Input: parts with quantities (a part that keeps its direction is not turned), the stock sheet, the edge to be trimmed off all
 * round. Output: sheets, a proven least number of them, the steps of each sheet, and what is left over. Each sheet takes the
 * pattern with most area of the parts still wanted; then those it makes too many of give way to others. Throws on a size that is
 * not positive and on a part larger than the sheet. Nothing is mutated.
 *
 * `atMm` of a step is measured on the piece that is cut, from its left or top edge.
 */
import { bestPattern, same } from './patterns.ts';
import type { CutTree, PatternPart } from './patterns.ts';
import type { CutPart, CutPlan, CutStep } from './types.ts';

interface Piece { widthMm: number; heightMm: number }
interface CutOptions { trimMm?: number }

/** Worth of a part beside its area: of equal areas the pattern with more parts is better. */
const WORTH_OF_A_PART = 1e-3;
/** Rounding of inches, mm. */
const SLACK_MM = 1e-6;

export function planCuts(parts: CutPart[], stock: { widthMm: number; heightMm: number }, options: CutOptions = {}): CutPlan {
  const trim = options.trimMm ?? 0;
  const usable = { widthMm: stock.widthMm - 2 * trim, heightMm: stock.heightMm - 2 * trim };
  check(parts, stock, usable);
  const left = parts.map((part) => part.quantity);
  const plan: CutPlan = { sheets: 0, atLeastSheets: sheetsAtLeast(parts, usable), steps: [], left: [], stock: { widthMm: stock.widthMm, heightMm: stock.heightMm } };
  let last: { before: string; tree: CutTree } | null = null;
  while (left.some((n) => n > 0)) {
    plan.sheets++;
    // The same parts are still wanted, in plenty: the same pattern is the best again.
    const before = JSON.stringify(left.map((n) => n > 0));
    const tree: CutTree = last && last.before === before && fitsDemand(last.tree, left) ? last.tree : sheetPattern(parts, left, usable);
    last = { before, tree };
    emit(plan, tree, left, stock, trim);
  }
  return plan;
}

function check(parts: readonly CutPart[], stock: Piece, usable: Piece): void {
  if (!(usable.widthMm > 0 && usable.heightMm > 0)) throw new RangeError(`A sheet of ${stock.widthMm} × ${stock.heightMm} mm leaves nothing inside its trim.`);
  for (const part of parts) {
    if (!(part.widthMm > 0 && part.heightMm > 0)) throw new RangeError(`Part ${JSON.stringify(part.id)} has no size: ${part.widthMm} × ${part.heightMm} mm.`);
    if (!(Number.isInteger(part.quantity) && part.quantity >= 0)) throw new RangeError(`Part ${JSON.stringify(part.id)} is wanted ${part.quantity} times.`);
    if (part.quantity > 0 && poses(part, 0).every((pose) => pose.widthMm > usable.widthMm + SLACK_MM || pose.heightMm > usable.heightMm + SLACK_MM)) {
      throw new RangeError(`Part ${JSON.stringify(part.id)} of ${part.widthMm} × ${part.heightMm} mm is larger than the sheet.`);
    }
  }
}

/** A part as it may lie. */
function poses(part: CutPart, index: number): PatternPart[] {
  const worth = part.widthMm * part.heightMm + WORTH_OF_A_PART;
  const upright = { index, widthMm: part.widthMm, heightMm: part.heightMm, worth };
  return part.keepDirection || same(part.widthMm, part.heightMm) ? [upright] : [upright, { ...upright, widthMm: part.heightMm, heightMm: part.widthMm }];
}

/**
 * The sheet with most area of what is wanted, then fewest cuts: of the best pattern under several worths of the parts (all
 * alike, each in turn three times its area), and of the largest part first, whichever comes out best.
 */
function sheetPattern(parts: readonly CutPart[], left: readonly number[], usable: Piece): CutTree {
  const open = parts.map((_, i) => i).filter((i) => left[i] > 0);
  const worths = [parts.map(() => 1), ...(open.length > 1 ? open.map((boosted) => parts.map((_, i) => (i === boosted ? 3 : 1))) : [])];
  const tries = [
    ...worths.map((worth) => patternWithin(parts, left, usable, worth)),
    ...(['x', 'y'] as const).map((axis) => largestFirst(parts, left, usable, axis)),
  ];
  return tries.reduce((best, tree) => (better(measure(tree, parts), measure(best, parts)) ? tree : best));
}

const better = (a: { area: number; cuts: number }, b: { area: number; cuts: number }): boolean => a.area > b.area + 1e-6 || (a.area > b.area - 1e-6 && a.cuts < b.cuts);

function measure(tree: CutTree, parts: readonly CutPart[]): { area: number; cuts: number } {
  if (tree.kind === 'left') return { area: 0, cuts: 0 };
  if (tree.kind === 'part') return { area: parts[tree.index].widthMm * parts[tree.index].heightMm, cuts: 0 };
  const [a, b] = [measure(tree.first, parts), measure(tree.second, parts)];
  return { area: a.area + b.area, cuts: a.cuts + b.cuts + 1 };
}

/** Best pattern; parts made too often are taken out piece by piece and their places cut anew. */
function patternWithin(parts: readonly CutPart[], left: readonly number[], usable: Piece, worth: readonly number[]): CutTree {
  const remaining = [...left];
  const solve = (piece: Piece): CutTree => {
    const open = parts.flatMap((part, i) => (remaining[i] > 0 ? poses(part, i).map((pose) => ({ ...pose, worth: pose.worth * worth[i] })) : []));
    return settle(bestPattern(piece.widthMm, piece.heightMm, open).tree, piece);
  };
  const settle = (tree: CutTree, piece: Piece): CutTree => {
    if (tree.kind === 'left') return tree;
    if (tree.kind === 'part') {
      if (remaining[tree.index] > 0) {
        remaining[tree.index]--;
        return tree;
      }
      return solve(piece);
    }
    const [a, b] = cutPiece(piece, tree.axis, tree.atMm);
    return joinTrees(tree, settle(tree.first, a), settle(tree.second, b));
  };
  return solve(usable);
}

/** Two pieces that nothing comes from are better left in one. */
function joinTrees(cut: { axis: 'x' | 'y'; atMm: number }, first: CutTree, second: CutTree): CutTree {
  return first.kind === 'left' && second.kind === 'left' ? { kind: 'left' } : { kind: 'cut', axis: cut.axis, atMm: cut.atMm, first, second };
}

/** The largest part that fits goes into the corner; the first cut across takes a strip of its size, the strip is filled, then the rest. */
function largestFirst(parts: readonly CutPart[], left: readonly number[], usable: Piece, axis: 'x' | 'y'): CutTree {
  const remaining = [...left];
  const bySize = parts.flatMap((part, i) => poses(part, i)).sort((a, b) => b.widthMm * b.heightMm - a.widthMm * a.heightMm);
  const fill = (piece: Piece): CutTree => {
    const pose = bySize.find((p) => remaining[p.index] > 0 && p.widthMm <= piece.widthMm + SLACK_MM && p.heightMm <= piece.heightMm + SLACK_MM);
    if (!pose) return { kind: 'left' };
    remaining[pose.index]--;
    const made: CutTree = { kind: 'part', index: pose.index };
    const across = (at: 'x' | 'y', of: Piece, inner: (strip: Piece) => CutTree): CutTree => {
      const size = at === 'x' ? pose.widthMm : pose.heightMm;
      const whole = at === 'x' ? of.widthMm : of.heightMm;
      if (same(size, whole)) return inner(of);
      const [strip, rest] = cutPiece(of, at, size);
      const first = inner(strip);
      return joinTrees({ axis: at, atMm: size }, first, fill(rest));
    };
    return across(axis, piece, (strip) => across(axis === 'x' ? 'y' : 'x', strip, () => made));
  };
  return fill(usable);
}

function fitsDemand(tree: CutTree, left: readonly number[]): boolean {
  const made = left.map(() => 0);
  const walk = (node: CutTree) => {
    if (node.kind === 'part') made[node.index]++;
    else if (node.kind === 'cut') [node.first, node.second].forEach(walk);
  };
  walk(tree);
  return made.every((n, i) => n <= left[i]);
}

function cutPiece({ widthMm, heightMm }: Piece, axis: 'x' | 'y', atMm: number): [Piece, Piece] {
  return axis === 'x' ? [{ widthMm: atMm, heightMm }, { widthMm: widthMm - atMm, heightMm }] : [{ widthMm, heightMm: atMm }, { widthMm, heightMm: heightMm - atMm }];
}

/** Writes down the steps of a sheet, trimming first, and takes off what it makes. */
function emit(plan: CutPlan, tree: CutTree, left: number[], stock: Piece, trim: number): void {
  const sheet = plan.sheets;
  const step = (piece: string, axis: CutStep['axis'], atMm: number): [string, string] => {
    const gives: [string, string] = piece === 's' ? ['s1', 's2'] : [`${piece}.1`, `${piece}.2`];
    plan.steps.push({ sheet, piece, axis, atMm, gives });
    return gives;
  };
  let name = 's';
  if (trim > 0) {
    name = step(name, 'x', trim)[1];
    name = step(name, 'x', stock.widthMm - 2 * trim)[0];
    name = step(name, 'y', trim)[1];
    name = step(name, 'y', stock.heightMm - 2 * trim)[0];
  }
  const walk = (node: CutTree, piece: Piece, pieceName: string): void => {
    if (node.kind === 'part') left[node.index]--;
    else if (node.kind === 'left') plan.left.push({ sheet, ...piece });
    else {
      const [a, b] = step(pieceName, node.axis, node.atMm);
      const [first, second] = cutPiece(piece, node.axis, node.atMm);
      walk(node.first, first, a);
      walk(node.second, second, b);
    }
  };
  walk(tree, { widthMm: stock.widthMm - 2 * trim, heightMm: stock.heightMm - 2 * trim }, name);
}

/** By area, by the most of each part that one sheet gives, and by parts too large to share a sheet with another such. */
function sheetsAtLeast(parts: readonly CutPart[], usable: Piece): number {
  const wanted = parts.map((part, index) => ({ part, index })).filter(({ part }) => part.quantity > 0);
  if (wanted.length === 0) return 0;
  const area = wanted.reduce((sum, { part }) => sum + part.quantity * part.widthMm * part.heightMm, 0) / (usable.widthMm * usable.heightMm);
  const alone = wanted.map(({ part, index }) => {
    const one = poses(part, index).map((pose) => ({ ...pose, worth: 1 }));
    return Math.ceil(part.quantity / Math.max(1, Math.round(bestPattern(usable.widthMm, usable.heightMm, one).worth)));
  });
  return Math.max(Math.ceil(area - 1e-9), ...alone);
}
