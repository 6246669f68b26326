/**
 * Drawings for the guillotine: how stock is cut into run sheets (a cut plan), and the straight cuts of a stamped sheet that is wider than the
 * die-cutting machine takes.
 *
 * A stock sheet is often larger than the paper, so the cut plan is a drawing to proportion with figures; strip cuts are at true size. `atMm` of a step is
 * measured on the piece that is cut, from its left or top edge. Stock sheets that are cut alike share a page.
 */
import type { CutPlan, CutStep } from '../cutplan/types.ts';
import type { Box } from '../geometry/types.ts';
import { formatLength, formatSize } from '../geometry/units.ts';
import { FINE_MM, grownBox, INK, line, rect, style, words } from './page-items.ts';
import { drawingPages, finishedPage, NOTE_MM, pageLayout } from './page-layout.ts';
import { stripCutItems } from './die-pages.ts';
import { cautionOf } from './cautions.ts';
import { ranges } from './template-context.ts';
import type { SetupContext, TemplateContext } from './template-context.ts';
import { shortened } from './text-width.ts';
import type { PageDescription, PageItem } from './types.ts';

const STEP_LINE_MM = 3.6;
/** Most of the page's height that the drawing takes. */
const DRAWING_SHARE = 0.6;

export function stripCutPages(context: SetupContext): PageDescription[] {
  const { setup, order: { sheet, maxFeedWidthMm }, unit, number } = context;
  if (setup.stripCuts.length === 0) return [];
  const box = { x: 0, y: 0, w: sheet.widthMm, h: sheet.heightMm };
  const items = [rect(box, 'trim-line', style.trim), ...stripCutItems(context)];
  return drawingPages(context, {
    name: `Setup ${number}: strip cuts`, heading: 'Strip cuts', side: context.side,
    notes: [
      `Cut every stamped sheet of this setup along the dashed lines, measured from its ${setup.stripCuts[0].axis === 'x' ? 'left' : 'top'} edge as it lay at the first press${maxFeedWidthMm === undefined ? '' : `: the machine takes ${formatLength(maxFeedWidthMm, unit)}`}. No label is crossed.`,
      cautionOf('blade'),
    ],
  }, items, [grownBox(box, 2), box]);
}

export function cutPlanPages(context: TemplateContext, cutPlan: CutPlan): PageDescription[] {
  const stock = context.labels.stock ?? leastStock(context, cutPlan);
  const groups = new Map<string, { steps: CutStep[]; sheets: number[] }>();
  for (let sheet = 1; sheet <= cutPlan.sheets; sheet++) {
    const steps = cutPlan.steps.filter((step) => step.sheet === sheet);
    const key = JSON.stringify(steps.map(({ piece, axis, atMm }) => [piece, axis, atMm]));
    const group = groups.get(key);
    if (group) group.sheets.push(sheet);
    else groups.set(key, { steps, sheets: [sheet] });
  }
  return [...groups.values()].map(({ steps, sheets }) => cutPlanPage(context, stock, steps, sheets, cutPlan.sheets));
}

function cutPlanPage(context: TemplateContext, stock: { widthMm: number; heightMm: number }, steps: readonly CutStep[], sheets: readonly number[], of: number): PageDescription {
  const name = `Cutting ${sheets.length === 1 ? 'stock sheet' : 'stock sheets'} ${ranges(sheets)}`;
  const { body, items } = pageLayout(context, {
    name, heading: 'Cutting the stock', side: `${sheets.length === 1 ? 'sheet' : 'sheets'} ${ranges(sheets)} of ${of}`,
    notes: [
      `${context.labels.stock === undefined ? 'Stock sheet of at least' : 'Stock sheet of'} ${formatSize(stock.widthMm, stock.heightMm, context.unit)}. A drawing to proportion, not at true size: set the guillotine by the figures. Each cut goes right across the piece in hand.`,
      cautionOf('blade'),
    ],
  });
  const k = Math.min(body.w / stock.widthMm, (body.h * DRAWING_SHARE) / stock.heightMm, 1);
  const at = { x: body.x + (body.w - stock.widthMm * k) / 2, y: body.y };
  const drawing: PageItem[] = [rect({ ...at, w: stock.widthMm * k, h: stock.heightMm * k }, 'stock-edge', style.trim)];
  const pieces = new Map<string, Box>([['s', { x: 0, y: 0, w: stock.widthMm, h: stock.heightMm }]]);
  steps.forEach((step, i) => {
    const box = pieces.get(step.piece);
    if (box === undefined) return;
    const [first, second] = step.axis === 'x'
      ? [{ ...box, w: step.atMm }, { ...box, x: box.x + step.atMm, w: box.w - step.atMm }]
      : [{ ...box, h: step.atMm }, { ...box, y: box.y + step.atMm, h: box.h - step.atMm }];
    pieces.set(step.gives[0], first).set(step.gives[1], second);
    pieces.delete(step.piece);
    const x1 = at.x + second.x * k, y1 = at.y + second.y * k;
    const x2 = step.axis === 'x' ? x1 : x1 + second.w * k, y2 = step.axis === 'x' ? y1 + second.h * k : y1;
    drawing.push(
      line(x1, y1, x2, y2, 'sheet-cut', { strokeMm: FINE_MM, stroke: INK, dashMm: [4, 1.5] }),
      words({ x: x1 + 0.7, y: y1 + (step.axis === 'x' ? 4 + (i % 4) * 3.6 : -0.8) }, `${i + 1}`, 3, 'number', { bold: true }),
    );
  });
  for (const [piece, { x, y, w, h }] of pieces) drawing.push(words({ x: at.x + (x + w / 2) * k, y: at.y + (y + h / 2) * k + 1 }, piece, 2.2, 'caption', { align: 'middle' }));
  return finishedPage(context, name, [...items, ...drawing, ...stepList(context, steps, { x: body.x, y: at.y + stock.heightMm * k + 4, w: body.w, h: body.y + body.h - at.y - stock.heightMm * k - 4 })]);
}

function stepList(context: TemplateContext, steps: readonly CutStep[], room: Box): PageItem[] {
  const perColumn = Math.max(1, Math.floor(room.h / STEP_LINE_MM));
  const columns = Math.max(1, Math.ceil(steps.length / perColumn));
  const width = room.w / columns;
  return steps.map((step, i) => {
    const text = `${i + 1}. ${step.piece === 's' ? 'Sheet' : `Piece ${step.piece}`}: ${formatLength(step.atMm, context.unit, { decimals: 2 })} from its ${step.axis === 'x' ? 'left' : 'top'} gives ${step.gives.join(' and ')}`;
    return words({ x: room.x + Math.floor(i / perColumn) * width, y: room.y + ((i % perColumn) + 1) * STEP_LINE_MM }, shortened(text, width - 2, NOTE_MM), NOTE_MM);
  });
}

/** Where nobody says how large the stock is: as large as its cuts show it to be, with a run sheet in each last piece. */
function leastStock({ order }: TemplateContext, { steps }: CutPlan): { widthMm: number; heightMm: number } {
  const first = steps.filter((step) => step.sheet === 1);
  const size = (piece: string, axis: 'x' | 'y'): number => {
    const step = first.find((s) => s.piece === piece);
    if (step === undefined) return axis === 'x' ? order.sheet.widthMm : order.sheet.heightMm;
    const [a, b] = step.gives;
    return step.axis === axis ? step.atMm + size(b, axis) : Math.max(size(a, axis), size(b, axis));
  };
  return { widthMm: size('s', 'x'), heightMm: size('s', 'y') };
}
