/**
 * Cut lines of one sheet as an SVG drawing at true size (W3C SVG 2: width and height in mm, viewBox in the same mm), one group for each die, for a
 * cutting machine or another drawing program. The sheet lies as at turn 0; labels of all turns are in it. Sheet coordinates, x right, y down.
 */
import { impressionPlace, sheetFrame } from '../gangrun/sheet-frame.ts';
import type { RunOrder, RunPlan } from '../gangrun/types.ts';
import type { Point, Ring } from '../geometry/types.ts';
import { readLabels } from './labels.ts';
import { pathData } from './page-svg.ts';
import { planShapes } from './plan-shapes.ts';

/** Hairline: a cutting program follows its middle. */
const STROKE_MM = 0.1;

/** `sheet`: numbered from 1 through the plan. Throws where the plan has no such sheet. */
export function cutFileSvg(order: RunOrder, plan: RunPlan, sheet: number, options: { title?: string; labels?: unknown } = {}): string {
  const setup = plan.setups.find((s) => s.presses.some((press) => press.sheet === sheet));
  if (setup === undefined) throw new RangeError(`The plan has no sheet ${sheet}.`);
  const frame = sheetFrame(order), shapes = planShapes(order), names = readLabels(options.labels);
  const byDie = new Map<string, Ring[][]>();
  for (const press of setup.presses.filter((p) => p.sheet === sheet)) {
    for (const { placement: id, lineId } of press.inked) {
      const place = setup.placements.findIndex((placement) => placement.id === id);
      const label = shapes.place(setup.placements[place], place + 1).labels.find((l) => l.lineId === lineId);
      if (label === undefined || label.cut === 'none') continue;
      const onSheet = (p: Point): Point => {
        const there = impressionPlace(p, press.turn, setup.turns, frame.centre);
        return { x: there.x - frame.sheet.x, y: there.y - frame.sheet.y };
      };
      byDie.set(label.dieId, [...(byDie.get(label.dieId) ?? []), label.outline.rings.map((ring) => ring.map(onSheet))]);
    }
  }
  const { widthMm, heightMm } = order.sheet;
  const groups = [...byDie].map(([dieId, outlines], i) => {
    const name = names.dies[dieId]?.name ?? `Die ${order.dies.findIndex((die) => die.id === dieId) + 1}`;
    return `<g id="die-${i + 1}" fill="none" stroke="#000" stroke-width="${STROKE_MM}"><title>${escaped(name)}</title>${outlines.map((rings) => `<path d="${pathData(rings, true)}"/>`).join('')}</g>`;
  });
  return [
    '<?xml version="1.0" encoding="UTF-8"?>',
    `<svg xmlns="http://www.w3.org/2000/svg" width="${widthMm}mm" height="${heightMm}mm" viewBox="0 0 ${widthMm} ${heightMm}">`,
    `<title>${escaped(options.title ?? `Cut lines, sheet ${sheet}`)}</title>`,
    ...groups, '</svg>', '',
  ].join('\n');
}

/** XML 1.0 §2.4. */
function escaped(text: string): string {
  return text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;').replace(/"/g, '&quot;');
}
