import { describe, expect, it } from 'vitest';
import { borderAt, createPlacer } from '../../server/engine/fit/border-at.ts';
import { composeSentiments, piecePlaces } from '../../server/engine/fit/compose-sentiments.ts';
import { bestFit, type DieGeometry } from '../../server/engine/fit/index.ts';
import { boxCentre, outlineBox } from '../../server/engine/geometry/ring.ts';
import { rotateOutline, translateOutline } from '../../server/engine/geometry/transform.ts';
import type { Outline } from '../../server/engine/geometry/types.ts';
import { bruteBorder, randomStar, seeded } from './fit-brute-force.ts';

const box = (w: number, h: number): Outline => ({ rings: [[{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }]] });
const LABEL: DieGeometry = { shape: { kind: 'rectangle', widthMm: 60, heightMm: 30 } };

describe('moving an artwork by hand', () => {
  it('tells the border and margins of the place where it is', () => {
    const placed = borderAt(box(30, 10), LABEL, { x: 27, y: 12 });
    expect(placed).toMatchObject({ fits: true, borderMm: 7, margins: { left: 12, right: 18, top: 7, bottom: 13 }, verdict: 'good' });
    expect(borderAt(box(30, 10), LABEL, { x: 16.5, y: 15 }).verdict).toBe('snug');
    expect(borderAt(box(30, 10), LABEL, { x: 10, y: 15 })).toMatchObject({ fits: false, borderMm: -5, verdict: 'no' });
    expect(borderAt(box(30, 10), LABEL, { x: 30, y: 15 }, 90)).toMatchObject({ borderMm: 0, verdict: 'tight', rotationDeg: 90 });
    expect(() => borderAt(box(30, 10), LABEL, { x: NaN, y: 15 })).toThrow('NaN');
  });

  it('agrees with the best fit at its place, and is never better elsewhere', () => {
    const random = seeded(11);
    for (const die of [LABEL, { shape: { kind: 'bracket', corners: 'concave', widthMm: 60, heightMm: 32, radiusMm: 7, stepMm: 1.5 } }, { shape: { kind: 'scalloped', base: 'oval', widthMm: 60, heightMm: 40, scallopMm: 6, depthMm: 2 }, stitchInsetMm: 1 }] as DieGeometry[]) {
      const ink = randomStar(random, 14, 34, 14, 0.5);
      const fit = bestFit(ink, die, { turnsDeg: [0, 180] });
      const placer = createPlacer(ink, die);
      expect(placer.at(fit.centre, fit.rotationDeg).borderMm).toBeCloseTo(fit.borderMm, 6);
      for (let i = 0; i < 200; i++) {
        const place = { x: fit.centre.x + (random() - 0.5) * 10, y: fit.centre.y + (random() - 0.5) * 6 };
        expect(placer.at(place, i % 2 ? 180 : 0).borderMm).toBeLessThanOrEqual(fit.boundMm + 1e-6);
      }
    }
  });

  it('measures any place and tilt in a label that is not convex as plain geometry does', () => {
    const random = seeded(23);
    for (let i = 0; i < 30; i++) {
      const area = randomStar(random, 14, 60, 40, 0.5), ink = randomStar(random, 10, 24, 12, 0.4);
      const centre = { x: 22 + random() * 14, y: 14 + random() * 10 }, tilt = random() * 360;
      const b = boxCentre(outlineBox(ink));
      const there = translateOutline(rotateOutline(translateOutline(ink, -b.x, -b.y), tilt), centre.x, centre.y);
      const plain = bruteBorder(there, area, 0.005);
      expect(Math.abs(borderAt(ink, { shape: { kind: 'outline', outline: area } }, centre, tilt).borderMm - plain)).toBeLessThan(0.004);
    }
  });
});

describe('combined sentiments', () => {
  it('stands pieces under one another or side by side, at the gap and aligned', () => {
    const stacked = composeSentiments([box(30, 8), box(20, 6), box(40, 4)], { direction: 'stacked', gapMm: [3, 2] });
    expect(outlineBox(stacked.artwork)).toEqual({ x: 0, y: 0, w: 40, h: 23 });
    expect(stacked.centres).toEqual([{ x: 20, y: 4 }, { x: 20, y: 14 }, { x: 20, y: 21 }]);
    expect(composeSentiments([box(30, 8), box(20, 6)], { direction: 'stacked', gapMm: 1, align: 'start' }).centres[1]).toEqual({ x: 10, y: 12 });
    expect(composeSentiments([box(30, 8), box(20, 6)], { direction: 'side-by-side', gapMm: 5, align: 'end' }).centres).toEqual([{ x: 15, y: 4 }, { x: 45, y: 5 }]);
    expect(() => composeSentiments([box(1, 1), box(1, 1)], { direction: 'stacked', gapMm: -1 })).toThrow('-1');
    expect(() => composeSentiments([], { direction: 'stacked', gapMm: 1 })).toThrow('at least one');
  });

  it('gives each piece its place in the label, where together they are the artwork that was fitted', () => {
    const pieces = [box(30, 8), translateOutline(box(20, 6), 70, -9)];
    const composition = composeSentiments(pieces, { direction: 'stacked', gapMm: 3, align: 'end' });
    const fit = bestFit(composition.artwork, { shape: { kind: 'rectangle', widthMm: 30, heightMm: 60 } }, { turnsDeg: [90] });
    const places = piecePlaces(composition, fit);
    const back = pieces.map((piece, i) => {
      const c = boxCentre(outlineBox(piece));
      return translateOutline(rotateOutline(translateOutline(piece, -c.x, -c.y), places[i].rotationDeg), places[i].centre.x, places[i].centre.y);
    });
    const whole = outlineBox({ rings: back.flatMap((b) => b.rings) });
    expect(whole.w).toBeCloseTo(17, 9);
    expect(whole.h).toBeCloseTo(30, 9);
    expect(whole.x).toBeCloseTo(fit.margins.left, 9);
    expect(whole.y).toBeCloseTo(fit.margins.top, 9);
  });
});
