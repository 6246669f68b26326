/**
 * The neat one among equal plans: labels in rows and columns with the air shared evenly, else at least more air.
 *
 * Tries, setup by setup, a grid of like labels side by side in the part of the sheet that its turns leave, then the same places
 * packed with a wider gap; keeps what checkLayout finds no fault in and costs no more. Pinned setups stay as they are.
 */
import { cellChoices } from './cells.ts';
import { checkLayout } from './layout.ts';
import { obstacleMaker } from './obstacles.ts';
import { packInOrder } from './packing.ts';
import type { Placed } from './packing.ts';
import type { OrderShapes } from './place-geometry.ts';
import { toSetupDraft } from './setups.ts';
import type { DraftSetup } from './setups.ts';
import type { SheetFrame } from './sheet-frame.ts';
import type { Box } from '../geometry/types.ts';
import type { RunPlan, Setup } from './types.ts';

type Made = Pick<RunPlan, 'setups' | 'cutPasses' | 'totals'>;

/** Air beyond the gap, mm: more than the first looks no better, less than the last does not show. */
const AIRS_MM = [8, 5, 3, 2, 1];
/** Setups with more labels are left as they are packed: trying takes longer than it is worth. */
const MOST_LABELS = 60;
const STEPS_A_TRY = 20_000;

export function neaten(shapes: OrderShapes, frame: SheetFrame, drafts: readonly DraftSetup[], price: (drafts: readonly DraftSetup[]) => Made, made: Made): Made {
  let best = [...drafts], bestMade = made;
  drafts.forEach((draft, i) => {
    if (draft.placed.some((place) => place.pin) || draft.placed.length > MOST_LABELS) return;
    for (const placed of arrangements(shapes, frame, draft)) {
      const { placements } = toSetupDraft(shapes, frame, { ...draft, placed }, placed.map(() => []));
      if (checkLayout(shapes.order, [{ turns: draft.turns, placements }]).length > 0) continue;
      const tried = best.map((other, k) => (k === i ? { ...draft, placed } : other));
      const priced = price(tried);
      if (priced.totals.minutes > bestMade.totals.minutes + 1e-9 || priced.totals.sheets > bestMade.totals.sheets) continue;
      [best, bestMade] = [tried, priced];
      break;
    }
  });
  return bestMade;
}

function* arrangements(shapes: OrderShapes, frame: SheetFrame, draft: DraftSetup): Generator<Placed[]> {
  const like = [...draft.placed].sort(byLikeness);
  for (const part of partsOfSheet(shapes, frame, draft.turns)) yield* grids(like, part, shapes.order.gapMm);
  for (const air of AIRS_MM) {
    const maker = obstacleMaker(shapes, frame, draft.turns, air);
    const budget = { left: STEPS_A_TRY, stopped: () => budget.left <= 0 };
    for (const { cells } of cellChoices(shapes.order, frame, draft.turns)) {
      const space = { frame, turns: draft.turns, maker, cells, stamps: shapes.order.stamps, budget };
      const { placed, left } = packInOrder(space, [], like.map((place) => place.pose.kind), { x: 0.01, y: 1, fromRight: false, fromBottom: false });
      if (left.length === 0) yield placed;
    }
  }
}

/** Like dies together, then like inks, larger ones first. */
function byLikeness(a: Placed, b: Placed): number {
  const key = ({ pose: { kind: { lines: [line] } } }: Placed) => [line.dieId, line.pieces[0].inkId];
  const [p, q] = [key(a), key(b)];
  return b.pose.labelBox.h - a.pose.labelBox.h || (p[0] < q[0] ? -1 : p[0] > q[0] ? 1 : 0) || (p[1] < q[1] ? -1 : p[1] > q[1] ? 1 : 0) || a.pose.kind.index - b.pose.kind.index;
}

/** The whole inner area, or the half or quarter that leaves room for the turned impressions. */
function partsOfSheet({ order }: OrderShapes, { inner, centre }: SheetFrame, turns: Setup['turns']): Box[] {
  const apart = (order.gapMm + order.turnToleranceMm) / 2;
  const left = { ...inner, w: centre.x - apart - inner.x }, top = { ...inner, h: centre.y - apart - inner.y };
  if (turns === 1) return [inner];
  return turns === 2 ? [left, top] : [{ ...left, h: top.h }];
}

/** Rows of one to all labels; those with most air first. */
function grids(labels: readonly Placed[], part: Box, gapMm: number): Placed[][] {
  const tried = labels.map((_, i) => grid(labels, part, i + 1)).filter((g) => g.airMm >= gapMm - 1e-9);
  return tried.sort((a, b) => b.airMm - a.airMm).map((g) => g.placed);
}

function grid(labels: readonly Placed[], part: Box, columns: number): { placed: Placed[]; airMm: number } {
  const rows = Array.from({ length: Math.ceil(labels.length / columns) }, (_, i) => labels.slice(i * columns, (i + 1) * columns));
  const widths = Array.from({ length: columns }, (_, c) => Math.max(...rows.map((row) => row[c]?.pose.labelBox.w ?? 0)));
  const heights = rows.map((row) => Math.max(...row.map((place) => place.pose.labelBox.h)));
  const airX = airBetween(part.w, widths), airY = airBetween(part.h, heights);
  let y = part.y + airY.edge;
  const placed = rows.flatMap((row, r) => {
    let x = part.x + airX.edge;
    const middle = y + heights[r] / 2;
    y += heights[r] + airY.between;
    return row.map((place, c) => {
      const { labelBox: box } = place.pose;
      const spot = { ...place, x: x + (widths[c] - box.w) / 2 - box.x, y: middle - box.h / 2 - box.y };
      x += widths[c] + airX.between;
      return spot;
    });
  });
  return { placed, airMm: Math.min(airX.between, airY.between) };
}

/** Even air, at the edges as well; negative where there is not enough room. */
function airBetween(length: number, sizes: readonly number[]): { edge: number; between: number } {
  const air = (length - sizes.reduce((sum, size) => sum + size, 0)) / (sizes.length + 1);
  return { edge: Math.max(0, air), between: air };
}
