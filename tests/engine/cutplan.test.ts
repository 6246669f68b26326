import { describe, expect, it } from 'vitest';
import { planCuts } from '../../server/engine/cutplan/index.ts';
import type { CutPart, CutPlan } from '../../server/engine/cutplan/index.ts';

const INCH = 25.4; // NIST SP 811, exact
const LETTER = { widthMm: 8.5 * INCH, heightMm: 11 * INCH };
const part = (widthMm: number, heightMm: number, quantity: number, keepDirection = false, id = 'p'): CutPart => ({ id, widthMm, heightMm, quantity, keepDirection });

/** Cuts paper as told and gives the pieces that are never cut again: a checker of its own. */
function cutPaper(plan: CutPlan, stock: { widthMm: number; heightMm: number }): { sheet: number; w: number; h: number }[] {
  const pieces = new Map<string, { sheet: number; w: number; h: number }>();
  for (let sheet = 1; sheet <= plan.sheets; sheet++) pieces.set(`${sheet} s`, { sheet, w: stock.widthMm, h: stock.heightMm });
  for (const step of plan.steps) {
    const key = `${step.sheet} ${step.piece}`;
    const piece = pieces.get(key);
    if (!piece) throw new Error(`There is no piece ${key} to cut.`);
    pieces.delete(key);
    const along = step.axis === 'x' ? piece.w : piece.h;
    expect(step.atMm).toBeGreaterThan(0);
    expect(step.atMm).toBeLessThan(along);
    const rest = step.axis === 'x' ? { ...piece, w: piece.w - step.atMm } : { ...piece, h: piece.h - step.atMm };
    pieces.set(`${step.sheet} ${step.gives[0]}`, step.axis === 'x' ? { ...piece, w: step.atMm } : { ...piece, h: step.atMm });
    pieces.set(`${step.sheet} ${step.gives[1]}`, rest);
  }
  return [...pieces.values()];
}

function made(plan: CutPlan, stock: { widthMm: number; heightMm: number }, wanted: CutPart): number {
  const is = (a: number, b: number) => Math.abs(a - b) < 1e-3;
  return cutPaper(plan, stock).filter(({ w, h }) => (is(w, wanted.widthMm) && is(h, wanted.heightMm)) || (!wanted.keepDirection && is(h, wanted.widthMm) && is(w, wanted.heightMm))).length;
}

describe('cutting parts from stock', () => {
  it('gets six parts of 4 × 3½ in with direction kept from a letter sheet (common practice, no source)', () => {
    const six = part(4 * INCH, 3.5 * INCH, 6, true);
    const plan = planCuts([six], LETTER);
    expect(plan).toMatchObject({ sheets: 1, atLeastSheets: 1 });
    expect(made(plan, LETTER, six)).toBe(6);
  });

  it('gets a 4¼ in strip and two 3 in strips from a 12 in sheet, with 1¾ in left (common practice, no source)', () => {
    const sheet = { widthMm: 12 * INCH, heightMm: 12 * INCH };
    const strips = [part(4.25 * INCH, 12 * INCH, 1, true, 'wide'), part(3 * INCH, 12 * INCH, 2, true, 'narrow')];
    const plan = planCuts(strips, sheet);
    expect(plan.sheets).toBe(1);
    expect(plan.left.map((piece) => piece.widthMm / INCH)).toEqual([expect.closeTo(1.75, 6)]);
    expect(plan.steps).toHaveLength(3);
  });

  it('takes as many sheets as the bound where parts tile the sheet', () => {
    const half = part(LETTER.widthMm / 2, LETTER.heightMm, 7, true);
    expect(planCuts([half], LETTER)).toMatchObject({ sheets: 4, atLeastSheets: 4 });
  });

  it('makes exactly what is wanted of every part, each piece cut right across', () => {
    const parts = [part(105, 148, 5, false, 'base'), part(95, 138, 5, true, 'mat'), part(40, 60, 9, false, 'label'), part(20, 20, 13, false, 'dot')];
    const stock = { widthMm: 210, heightMm: 297 };
    const plan = planCuts(parts, stock);
    for (const one of parts) expect(made(plan, stock, one)).toBeGreaterThanOrEqual(one.quantity);
    expect(plan.atLeastSheets).toBeLessThanOrEqual(plan.sheets);
    const area = cutPaper(plan, stock).reduce((sum, { w, h }) => sum + w * h, 0);
    expect(area).toBeCloseTo(plan.sheets * 210 * 297, 3);
  });

  it('turns a part only where its direction is free', () => {
    const stock = { widthMm: 100, heightMm: 50 };
    expect(planCuts([part(50, 100, 1)], stock).sheets).toBe(1);
    expect(() => planCuts([part(50, 100, 1, true)], stock)).toThrow(/larger than the sheet/);
  });

  it('trims the edges first, and says what cannot be', () => {
    const plan = planCuts([part(90, 40, 1)], { widthMm: 100, heightMm: 50 }, { trimMm: 5 });
    expect(plan.steps).toHaveLength(4);
    expect(() => planCuts([part(0, 40, 1)], LETTER)).toThrow(/no size/);
    expect(() => planCuts([part(10, 40, 1.5)], LETTER)).toThrow(/1.5 times/);
    expect(planCuts([], LETTER)).toMatchObject({ sheets: 0, atLeastSheets: 0, steps: [], left: [] });
  });
});
