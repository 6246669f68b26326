/** Sheets of a cut plan, those cut alike told together, each as rectangles and numbered cuts to draw. Pure; mm. */
import type { CutPlan, CutStep } from '../../../server/engine/cutplan/types.ts';
import type { Box } from '../../../server/engine/geometry/types.ts';

export interface StockSheet { sheets: number[]; pieces: Box[]; cuts: { number: number; d: string; at: { x: number; y: number }; atMm: number; from: string; piece: string }[] }

export function stockSheets(plan: CutPlan, stock: { widthMm: number; heightMm: number }): StockSheet[] {
  const bySheet = new Map<number, CutStep[]>();
  for (const step of plan.steps) bySheet.set(step.sheet, [...(bySheet.get(step.sheet) ?? []), step]);
  const groups = new Map<string, StockSheet>();
  for (let sheet = 1; sheet <= plan.sheets; sheet += 1) {
    const steps = bySheet.get(sheet) ?? [];
    const key = JSON.stringify(steps.map(({ piece, axis, atMm }) => [piece, axis, atMm]));
    const same = groups.get(key);
    if (same) same.sheets.push(sheet);
    else groups.set(key, { sheets: [sheet], ...drawn(steps, stock) });
  }
  return [...groups.values()];
}

function drawn(steps: readonly CutStep[], stock: { widthMm: number; heightMm: number }): Pick<StockSheet, 'pieces' | 'cuts'> {
  const names = new Map<string, string>([['s', 'the sheet']]);
  const pieces = new Map<string, Box>([['s', { x: 0, y: 0, w: stock.widthMm, h: stock.heightMm }]]);
  const cuts = steps.map(({ piece, axis, atMm, gives }, i) => {
    const box = pieces.get(piece)!;
    pieces.delete(piece);
    const [first, second] = axis === 'x'
      ? [{ ...box, w: atMm }, { ...box, x: box.x + atMm, w: box.w - atMm }]
      : [{ ...box, h: atMm }, { ...box, y: box.y + atMm, h: box.h - atMm }];
    const called = names.get(piece) ?? 'the piece';
    names.set(gives[0], axis === 'x' ? `the left piece of cut ${i + 1}` : `the upper piece of cut ${i + 1}`);
    names.set(gives[1], axis === 'x' ? `the right piece of cut ${i + 1}` : `the lower piece of cut ${i + 1}`);
    pieces.set(gives[0], first);
    pieces.set(gives[1], second);
    const d = axis === 'x' ? `M${second.x} ${box.y}v${box.h}` : `M${box.x} ${second.y}h${box.w}`;
    return { number: i + 1, d, atMm, from: axis === 'x' ? 'left' : 'top', piece: called, at: axis === 'x' ? { x: second.x, y: box.y + box.h / 2 } : { x: box.x + box.w / 2, y: second.y } };
  });
  return { pieces: [...pieces.values()], cuts };
}
