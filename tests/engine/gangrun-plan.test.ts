import { describe, expect, it } from 'vitest';
import { checkLayout, planGangRun } from '../../server/engine/gangrun/index.ts';
import { faultsOf } from './gangrun-checker.ts';
import { order, packingOrder, randomOrder, rectangle } from './gangrun-orders.ts';

/** A005842: least side of a square that holds squares of sides 1 … n (OEIS). */
const A005842 = [1, 3, 5, 7, 9, 11, 13, 15, 18];
/** Greatest radius of n equal circles in a unit square, n = 2 … 10 (proven optimal; closed forms from memory: r = d / (2 (1 + d))). */
const CIRCLES = [0.292893219, 0.254333095, 0.25, 0.207106781, 0.187680601, 0.17445763, 0.170540689, 0.166666667, 0.148204322];

describe('a plan', () => {
  it('of six stamps and six cards is one setup, one press, one sheet (common practice, no source)', () => {
    const six = order(Array.from({ length: 6 }, () => ({ w: 60, h: 26, count: 1 })));
    const plan = planGangRun(six);
    expect(faultsOf(six, plan)).toEqual([]);
    expect(plan.totals).toMatchObject({ setups: 1, presses: 1, sheets: 1 });
    expect(plan.totals.sheets).toBe(plan.atLeast.sheets);
  });

  it.each(Array.from({ length: process.env.LONG ? 500 : 60 }, (_, i) => i + 1))('keeps every rule of random order %i, and no bound above its total', (seed) => {
    const random = randomOrder(seed);
    const plan = planGangRun(random);
    expect(faultsOf(random, plan)).toEqual([]);
    expect(checkLayout(random, plan.setups)).toEqual([]);
  });

  it('is the same again, and no worse with more effort', () => {
    for (const seed of [3, 14, 25]) {
      const random = { ...randomOrder(seed, 8), aim: 'time' as const };
      const once = planGangRun(random);
      expect(planGangRun(random)).toEqual(once);
      expect(planGangRun({ ...random, effort: 3 }).totals.minutes).toBeLessThanOrEqual(once.totals.minutes + 1e-9);
    }
  });

  it('halves the sheets with half turns where the sheet allows it, and quarters them on a square one', () => {
    const labels = [{ w: 50, h: 20, count: 8 }, { w: 50, h: 20, count: 8 }];
    expect(planGangRun(order(labels, { aim: 'sheets' })).totals.sheets).toBe(8);
    expect(planGangRun(order(labels, { aim: 'sheets', turns: 'half' })).totals.sheets).toBe(4);
    const square = { sheet: { widthMm: 152.4, heightMm: 152.4, marginMm: 3 }, aim: 'sheets' as const, turns: 'quarter' as const };
    expect(planGangRun(order(labels, square)).totals.sheets).toBe(2);
  });

  it('spreads counts over setups: of three labels of which two fit, two of each in three sheets', () => {
    const wide = { w: 100, h: 70, count: 2 };
    const three = order([wide, wide, wide], { aim: 'sheets' });
    const plan = planGangRun(three);
    expect(faultsOf(three, plan)).toEqual([]);
    expect(plan.totals.sheets).toBe(3);
    expect(plan.atLeast.setups).toBeLessThanOrEqual(2);
  });

  it('sets a second copy of a stamp beside the first where that saves presses', () => {
    const two = order([{ w: 50, h: 20, count: 6 }]);
    two.stamps[0].owned = 2;
    two.dies[0].owned = 2;
    expect(planGangRun(two).totals).toMatchObject({ presses: 3, setups: 1 });
  });

  it('stops with a whole plan when it is told to', () => {
    const stop = new Int32Array(new SharedArrayBuffer(4));
    stop[0] = 1;
    const many = order(Array.from({ length: 20 }, (_, i) => ({ w: 40 + i, h: 20, count: 1 + (i % 5) })));
    const plan = planGangRun(many, { stop });
    expect(faultsOf(many, plan)).toEqual([]);
  });
});

describe('packing', () => {
  it('lays Moroń’s nine squares into 33 × 32 without a gap (Z. Moroń 1925, from memory; areas checked)', () => {
    const squares = [18, 15, 14, 10, 9, 8, 7, 4, 1].map((side) => ({ w: side * 4, h: side * 4 }));
    const moron = packingOrder(squares, { w: 33 * 4, h: 32 * 4 });
    const plan = planGangRun(moron);
    expect(faultsOf(moron, plan)).toEqual([]);
    expect(plan.totals.sheets).toBe(1);
  });

  it.each(A005842.map((side, i) => ({ n: i + 1, side })))('lays squares 1 … $n into a square of side $side (OEIS A005842)', ({ n, side }) => {
    const squares = packingOrder(Array.from({ length: n }, (_, i) => ({ w: (i + 1) * 8, h: (i + 1) * 8 })), { w: side * 8, h: side * 8 });
    const plan = planGangRun(squares);
    expect(faultsOf(squares, plan)).toEqual([]);
    expect(plan.totals.sheets).toBe(1);
  });

  it.each(CIRCLES.map((radius, i) => ({ n: i + 2, radius })))('lays $n equal circles into a square with 1 % slack', ({ n, radius }) => {
    const side = 150, diameter = 2 * radius * side * 0.99;
    const circles = packingOrder(Array.from({ length: n }, () => ({ w: diameter, h: diameter })), { w: side, h: side });
    circles.dies = circles.dies.map((die) => ({ ...die, geometry: { shape: { kind: 'oval', widthMm: diameter, heightMm: diameter } } }));
    const plan = planGangRun(circles);
    expect(faultsOf(circles, plan)).toEqual([]);
    expect(plan.totals.sheets).toBe(1);
  });
});

describe('what cannot be made', () => {
  const codes = (o: Parameters<typeof planGangRun>[0]) => planGangRun(o).unplaced.map(({ lineId, code }) => `${lineId} ${code}`);
  const good = { w: 50, h: 20, count: 2 };

  it('is told line by line, and the rest is planned', () => {
    const mixed = order([good, { w: 200, h: 60, count: 1 }, { w: 50, h: 20, count: 0 }, good, good]);
    mixed.dies[3].owned = 0;
    mixed.stamps[4].owned = 0;
    const plan = planGangRun(mixed);
    expect(plan.unplaced.map(({ lineId, code }) => `${lineId} ${code}`)).toEqual(['l1 label-too-large', 'l2 nothing-wanted', 'l3 no-die', 'l4 no-stamp']);
    expect(plan.unplaced.every(({ message }) => message.length > 10)).toBe(true);
    expect(faultsOf(mixed, plan)).toEqual([]);
    expect(plan.totals.presses).toBe(2);
  });

  it('names the sheet, the turns, the lid and pieces that overlap', () => {
    expect(codes(order([good, good], { sheet: { widthMm: 180, heightMm: 160, marginMm: 3 }, platform: { widthMm: 160, heightMm: 170, keepOuts: [], corner: 'top-right' } }))).toEqual(['l0 sheet-does-not-lie', 'l1 sheet-does-not-lie']);
    expect(codes(order([good], { turns: 'quarter' }))).toEqual(['l0 turns-impossible']);
    expect(codes(order([good], { platform: { widthMm: 160, heightMm: 170, keepOuts: [], lid: { x: 0, y: 0, w: 20, h: 20 } } }))).toEqual(['l0 ink-off-lid']);
    const twice = order([good]);
    twice.stamps.push({ id: 'other', artwork: rectangle(20, 8), trimMm: 1, owned: 1 });
    twice.lines[0].pieces.push({ stampId: 'other', centre: { x: 30, y: 10 }, rotationDeg: 0, inkId: 'night' });
    expect(codes(twice)).toEqual(['l0 pieces-overlap']);
  });
});

describe('pinned places', () => {
  const pin = (x: number, y: number) => ({ setup: 0, placement: { id: 7, stamps: [{ stampId: 's0', copy: 1 }], lineIds: ['l0'], x, y, rotationDeg: 0 } });
  const labels = [{ w: 50, h: 20, count: 2 }, { w: 50, h: 20, count: 2 }, { w: 40, h: 20, count: 1 }];

  it('stay to the last digit, and the rest is planned round them', () => {
    const pinned = order(labels, { pinned: [pin(71.234567, 80.7654321)] });
    const plan = planGangRun(pinned);
    expect(plan.setups[0].placements.find((placement) => placement.id === 7)).toMatchObject({ x: 71.234567, y: 80.7654321, rotationDeg: 0 });
    expect(faultsOf(pinned, plan)).toEqual([]);
    expect(plan.unplaced).toEqual([]);
  });

  it('that cannot stand make their lines unplaced, and no others', () => {
    const off = order(labels, { pinned: [pin(5, 5)] });
    const plan = planGangRun(off);
    expect(plan.unplaced.map(({ lineId, code }) => `${lineId} ${code}`)).toEqual(['l0 pin-conflict']);
    expect(faultsOf(off, plan)).toEqual([]);
  });
});
