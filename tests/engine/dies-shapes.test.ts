/** Cut lines of all shapes: their boxes, arcs against their circles, areas in closed form, checks, nested sets, tracing. */
import { describe, expect, it } from 'vitest';
import { checkDie, checkDieShape, DIE_SHAPES, dieProblem, startingShape } from '../../server/engine/fit/die-shapes.ts';
import { neededDie, nestedSizes, resizedShape, smallestCardFront } from '../../server/engine/fit/die-sizes.ts';
import { bestFit, dieOutline, usableOutline, type DieShape } from '../../server/engine/fit/index.ts';
import { offsetDie } from '../../server/engine/fit/offset-die.ts';
import { findCrossing } from '../../server/engine/fit/outline-check.ts';
import { traceDie } from '../../server/engine/fit/trace-die.ts';
import { outlineArea, outlineBox, signedArea } from '../../server/engine/geometry/ring.ts';
import { rotateOutline, translateOutline } from '../../server/engine/geometry/transform.ts';
import type { Outline } from '../../server/engine/geometry/types.ts';
import { pointToSegment, seeded, segmentsOf } from './fit-brute-force.ts';

const ALL: DieShape[] = [
  ...DIE_SHAPES.map((row) => startingShape(row.form)),
  { kind: 'scalloped', base: 'rectangle', widthMm: 71.3, heightMm: 40.7, scallopMm: 6, depthMm: 2 }, { kind: 'bracket', corners: 'concave', widthMm: 70, heightMm: 41, radiusMm: 6, stepMm: 2 },
  { kind: 'notched', at: 'ends', widthMm: 40, heightMm: 70, notchRadiusMm: 5 }, { kind: 'banner', ends: 'two', widthMm: 70, heightMm: 40, forkMm: 10 },
  { kind: 'tag', widthMm: 40, heightMm: 70, shoulderMm: 10, holeMm: 5 }, { kind: 'banner', ends: 'one', widthMm: 30, heightMm: 90, forkMm: 12 }, { kind: 'arch', widthMm: 50, heightMm: 80, riseMm: 12 },
];
const named = ALL.map((shape): [string, DieShape] => [JSON.stringify(shape), shape]);
const size = (shape: DieShape): { w: number; h: number } => (shape.kind === 'outline' ? outlineBox(shape.outline) : { w: shape.widthMm, h: shape.heightMm });

describe('every shape', () => {
  it.each(named)('%s has the box that was asked for, starts at 0, 0, runs clockwise and does not cross itself', (_, shape) => {
    const outline = dieOutline({ shape });
    const box = outlineBox(outline);
    expect(Math.abs(box.x) + Math.abs(box.y)).toBeLessThan(1e-9);
    expect(box.w).toBeCloseTo(size(shape).w, 9);
    expect(box.h).toBeCloseTo(size(shape).h, 9);
    expect(signedArea(outline.rings[0])).toBeGreaterThan(0);
    expect(findCrossing(outline)).toBeNull();
  });

  it.each(named)('%s keeps its stitch line at an even distance', (_, shape) => {
    const inset = 1.7;
    const cut = segmentsOf(dieOutline({ shape }));
    const usable = usableOutline({ shape, stitchInsetMm: inset });
    expect(usable.rings.length).toBeGreaterThan(0);
    for (const [a, b] of segmentsOf(usable)) {
      const middle = { x: (a.x + b.x) / 2, y: (a.y + b.y) / 2 };
      for (const p of [a, middle]) expect(Math.abs(Math.min(...cut.map((s) => pointToSegment(p, s))) - inset)).toBeLessThan(0.02);
    }
  });
});

describe('areas in closed form', () => {
  const area = (shape: DieShape): number => outlineArea(dieOutline({ shape }));
  const circle = (r: number): number => Math.PI * r * r;
  it.each<[string, DieShape, number]>([
    ['rounded rectangle', { kind: 'rectangle', widthMm: 60, heightMm: 40, cornerRadiusMm: 8 }, 2400 - 4 * 64 + circle(8)],
    ['oval', { kind: 'oval', widthMm: 60, heightMm: 40 }, Math.PI * 30 * 20],
    ['stadium', { kind: 'stadium', widthMm: 60, heightMm: 40 }, 800 + circle(20)],
    ['convex bracket', { kind: 'bracket', corners: 'convex', widthMm: 60, heightMm: 40, radiusMm: 6, stepMm: 2 }, 2400 - 4 * (64 - 36) - 4 * 36 + circle(6)],
    ['concave bracket', { kind: 'bracket', corners: 'concave', widthMm: 60, heightMm: 40, radiusMm: 6, stepMm: 2 }, 2400 - 4 * 28 - circle(6)],
    ['ticket, corners', { kind: 'notched', at: 'corners', widthMm: 60, heightMm: 40, notchRadiusMm: 6 }, 2400 - circle(6)],
    ['ticket, ends', { kind: 'notched', at: 'ends', widthMm: 60, heightMm: 40, notchRadiusMm: 6 }, 2400 - circle(6)],
    ['tag', { kind: 'tag', widthMm: 60, heightMm: 40, shoulderMm: 10, holeMm: 6 }, 2400 - 100 - circle(3)],
    ['banner, one end', { kind: 'banner', ends: 'one', widthMm: 60, heightMm: 40, forkMm: 12 }, 2400 - 240],
    ['banner, both ends', { kind: 'banner', ends: 'two', widthMm: 60, heightMm: 40, forkMm: 12 }, 2400 - 480],
    ['hexagon', { kind: 'hexagon', widthMm: 60, heightMm: 40, pointMm: 15 }, 2400 - 600],
    ['arch', { kind: 'arch', widthMm: 60, heightMm: 50 }, 60 * 20 + circle(30) / 2],
  ])('%s', (_, shape, expected) => {
    // A chord's segment has two thirds of its length times the sagitta, which is 0.01 mm at most.
    expect(Math.abs(area(shape) - expected)).toBeLessThan(0.01 * 250);
    expect(Math.abs(area(shape) / expected - 1)).toBeLessThan(0.001);
  });

  it('draws scallops as arcs of the asked depth, no wider than asked', () => {
    const shape: DieShape = { kind: 'scalloped', base: 'oval', widthMm: 60, heightMm: 60, scallopMm: 6, depthMm: 2 };
    const fromMiddle = dieOutline({ shape }).rings[0].map((p) => Math.hypot(p.x - 30, p.y - 30));
    expect(Math.max(...fromMiddle)).toBeCloseTo(30, 2);
    const cusps = fromMiddle.filter((r, i) => r < fromMiddle[(i + 1) % fromMiddle.length] && r < fromMiddle[(i + fromMiddle.length - 1) % fromMiddle.length]);
    const pitch = (2 * Math.PI * 27) / cusps.length;
    expect(pitch).toBeLessThan(6.3);
    expect(30 - Math.min(...fromMiddle)).toBeLessThan(2.3);
    expect(30 - Math.min(...fromMiddle)).toBeGreaterThan(1.2);
  });
});

describe('checking what a person entered', () => {
  it('says for each field what is wrong, in the person\'s unit', () => {
    expect(checkDieShape({ kind: 'rectangle', widthMm: 50.8, heightMm: 25.4, cornerRadiusMm: 20 }, 'in')).toEqual([{ path: 'cornerRadiusMm', message: 'Corner radius: at most 1/2 in, half of the shorter side.' }]);
    expect(checkDieShape({ kind: 'banner', ends: 'three', widthMm: 50, heightMm: 0.2, forkMm: 5 }).map((f) => f.path)).toEqual(['ends', 'heightMm']);
    expect(dieProblem({ shape: { kind: 'cloud' } })).toContain('cloud');
    expect(dieProblem({ shape: { kind: 'oval', widthMm: '50', heightMm: 30 } })).toBe('Width: a length is needed.');
    expect(checkDie({ shape: { kind: 'oval', widthMm: 50, heightMm: 30 }, rimMm: -1, stitchInsetMm: NaN }).map((f) => f.path)).toEqual(['stitchInsetMm', 'rimMm']);
    expect(dieProblem({ shape: { kind: 'scalloped', base: 'oval', widthMm: 20, heightMm: 20, scallopMm: 10, depthMm: 0.6 } })).toContain('do not close');
  });

  it.each([null, 7, {}, { shape: null }, { shape: { kind: 'outline' } }, { shape: { kind: 'outline', outline: { rings: [] } } }, { shape: { kind: 'outline', outline: { rings: [[{ x: 0, y: 0 }, { x: 5, y: 'a' }]] } } }, { shape: { kind: 'outline', outline: { rings: [[{ x: 0, y: 0 }, { x: 9, y: 9 }, { x: NaN, y: 0 }]] } } }])('refuses %j without falling over', (die) => {
    expect(typeof dieProblem(die)).toBe('string');
  });

  it('finds where an own outline crosses itself, and still fits in it even-odd', () => {
    const bowTie: Outline = { rings: [[{ x: 0, y: 0 }, { x: 40, y: 30 }, { x: 40, y: 0 }, { x: 0, y: 30 }]] };
    expect(dieProblem({ shape: { kind: 'outline', outline: bowTie } })).toContain('near 20.0, 15.0');
    expect(outlineArea(dieOutline({ shape: { kind: 'outline', outline: bowTie } }))).toBeCloseTo(600, 3);
  });
});

describe('sizes', () => {
  it('makes a nested set from the largest and a step, corners kept as long as they can be', () => {
    const set = nestedSizes({ kind: 'rectangle', widthMm: 60, heightMm: 30, cornerRadiusMm: 5 }, 8, 6);
    expect(set.map((s) => size(s).w)).toEqual([60, 52, 44, 36]);
    expect(set.map((s) => (s.kind === 'rectangle' ? s.cornerRadiusMm : 0))).toEqual([5, 5, 5, 3]);
    expect(resizedShape({ kind: 'tag', widthMm: 60, heightMm: 30, shoulderMm: 8, holeMm: 4 }, 20, 10)).toEqual({ kind: 'tag', widthMm: 20, heightMm: 10, shoulderMm: 5, holeMm: 4 });
    expect(() => nestedSizes({ kind: 'oval', widthMm: 60, heightMm: 30 }, 0, 3)).toThrow('step');
  });

  it('nests own outlines at an even distance', () => {
    const outline = dieOutline({ shape: { kind: 'notched', at: 'corners', widthMm: 80, heightMm: 50, notchRadiusMm: 6 } });
    const set = nestedSizes({ kind: 'outline', outline }, 10, 3);
    expect(set).toHaveLength(3);
    set.forEach((shape, i) => expect(outlineBox(dieOutline({ shape })).w).toBeCloseTo(80 - 10 * i, 2));
    expect(outlineBox(offsetDie(outline, 3)!).h).toBeCloseTo(56, 2);
    expect(offsetDie(outline, -30)).toBeNull();
  });

  it('finds the die that an artwork needs', () => {
    const ink: Outline = { rings: [[{ x: 0, y: 0 }, { x: 40, y: 0 }, { x: 40, y: 10 }, { x: 0, y: 10 }]] };
    const die = neededDie(ink, { kind: 'rectangle', widthMm: 50, heightMm: 50 }, 4, { stitchInsetMm: 1 })!;
    expect(size(die.shape).w).toBeCloseTo(50, 1);
    expect(size(die.shape).h).toBeCloseTo(20, 1);
    // In a circle: the diagonal and twice the border.
    const round = neededDie(ink, { kind: 'oval', widthMm: 30, heightMm: 30 }, 3, { ratio: 'of-shape' })!;
    expect(size(round.shape).w).toBeCloseTo(Math.hypot(40, 10) + 6, 1);
    const banner = neededDie(ink, { kind: 'banner', ends: 'two', widthMm: 70, heightMm: 30, forkMm: 8 }, 3)!;
    expect(bestFit(ink, banner).borderMm).toBeGreaterThanOrEqual(3 - 0.001);
    expect(neededDie(ink, { kind: 'rectangle', widthMm: 50, heightMm: 50 }, 600)).toBeNull();
  });

  it('finds the smallest card front for a label with its mat', () => {
    // Common practice: an A2 card front is 4 1/4 × 5 1/2 in.
    const a2 = { name: 'A2', widthMm: 107.95, heightMm: 139.7 }, large = { name: '5 × 7 in', widthMm: 127, heightMm: 177.8 };
    const needed = smallestCardFront({ shape: { kind: 'oval', widthMm: 120, heightMm: 90 } }, 3, 5, [large, a2]);
    expect(needed.mat).toEqual({ widthMm: 126, heightMm: 96 });
    expect(needed.front).toEqual({ widthMm: 136, heightMm: 106 });
    expect(needed.smallest).toEqual({ front: a2, turned: true });
    expect(smallestCardFront({ shape: { kind: 'oval', widthMm: 200, heightMm: 90 } }, 3, 5, [large, a2]).smallest).toBeNull();
  });
});

describe('tracing a label from its scan', () => {
  /** As read at 300 dpi: points near the true line, half a pixel to either side. */
  function scanned(outline: Outline, seed: number): Outline {
    const random = seeded(seed), pixel = 25.4 / 300;
    return { rings: outline.rings.map((ring) => segmentsOf({ rings: [ring] }).flatMap(([a, b]) => {
      const steps = Math.max(1, Math.round(Math.hypot(b.x - a.x, b.y - a.y) / (2 * pixel)));
      return Array.from({ length: steps }, (_, i) => ({ x: a.x + ((b.x - a.x) * i) / steps + (random() - 0.5) * pixel, y: a.y + ((b.y - a.y) * i) / steps + (random() - 0.5) * pixel }));
    })) };
  }

  it.each<[string, DieShape]>([
    ['oval', { kind: 'oval', widthMm: 60, heightMm: 40 }], ['rectangle', { kind: 'rectangle', widthMm: 60, heightMm: 40 }],
    ['scalloped', { kind: 'scalloped', base: 'oval', widthMm: 60, heightMm: 60, scallopMm: 8, depthMm: 2.5 }], ['banner', { kind: 'banner', ends: 'two', widthMm: 70, heightMm: 35, forkMm: 10 }],
  ])('%s comes out smooth, within 0.1 mm of the label, corners kept', (_, shape) => {
    const truth = dieOutline({ shape });
    const traced = traceDie(translateOutline(scanned(rotateOutline(truth, 0), 5), 33, 44));
    expect(traced.problem).toBeNull();
    expect(traced.widthMm).toBeCloseTo(size(shape).w, 0.7);
    const box = outlineBox(traced.outline), edges = segmentsOf(truth);
    const dx = (size(shape).w - box.w) / 2, dy = (size(shape).h - box.h) / 2;
    const off = traced.outline.rings[0].map((p) => Math.min(...edges.map((s) => pointToSegment({ x: p.x + dx, y: p.y + dy }, s))));
    expect(Math.max(...off)).toBeLessThan(0.15);
    expect(off.reduce((sum, d) => sum + d, 0) / off.length).toBeLessThan(0.04);
    expect(traced.movedMm).toBeLessThan(0.3);
    // And back the other way: no corner of the label was rounded off by more.
    const back = segmentsOf(traced.outline);
    for (const p of truth.rings[0]) expect(Math.min(...back.map((s) => pointToSegment({ x: p.x - dx, y: p.y - dy }, s)))).toBeLessThan(0.2);
  });

  it('keeps a hole, drops dust, and says when the line crosses itself', () => {
    const tag = dieOutline({ shape: { kind: 'tag', widthMm: 60, heightMm: 30, shoulderMm: 8, holeMm: 5 } });
    const dust = [{ x: 40, y: 10 }, { x: 40.4, y: 10 }, { x: 40.2, y: 10.4 }];
    expect(traceDie({ rings: [...tag.rings, dust] }).outline.rings).toHaveLength(2);
    expect(traceDie({ rings: tag.rings }, { holes: false }).outline.rings).toHaveLength(1);
    expect(traceDie({ rings: [[{ x: 0, y: 0 }, { x: 41.3, y: 30 }, { x: 40, y: 0 }, { x: 0, y: 30 }]] }).problem).toContain('crosses itself');
  });
});
