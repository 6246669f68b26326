/** Fits in convex labels against closed forms. All of them follow from elementary geometry; each is stated where it is used. */
import { describe, expect, it } from 'vitest';
import { bestFit, dieOutline, fitTable, usableOutline, type DieGeometry } from '../../server/engine/fit/index.ts';
import { recommendedDie } from '../../server/engine/fit/verdict.ts';
import { outlineArea, outlineBox } from '../../server/engine/geometry/ring.ts';
import { rotateOutline, translateOutline } from '../../server/engine/geometry/transform.ts';
import type { Outline } from '../../server/engine/geometry/types.ts';

/** Arcs are flattened to 0.01 mm. */
const ARC_MM = 0.0101;

function rectangle(w: number, h: number): Outline {
  return { rings: [[{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }]] };
}
function die(kind: 'rectangle' | 'oval' | 'stadium', widthMm: number, heightMm: number, rest: Partial<DieGeometry> = {}): DieGeometry {
  return { shape: { kind, widthMm, heightMm }, ...rest };
}
function regular(n: number, radius: number, fromDeg = 0): Outline {
  return { rings: [Array.from({ length: n }, (_, i) => ({ x: radius * Math.cos(((fromDeg + (i * 360) / n) * Math.PI) / 180), y: radius * Math.sin(((fromDeg + (i * 360) / n) * Math.PI) / 180) }))] };
}

describe('best fit in a convex label', () => {
  it.each([[40, 10, 60, 30], [40, 10, 60, 12], [20, 20, 25, 70], [50, 12, 40, 20], [10, 10, 10, 10]])('puts a rectangle %d × %d in the middle of one %d × %d with equal margins', (w, h, W, H) => {
    const fit = bestFit(rectangle(w, h), die('rectangle', W, H));
    expect(fit.borderMm).toBeCloseTo(Math.min(W - w, H - h) / 2, 9);
    expect(fit.boundMm).toBe(fit.borderMm);
    expect(fit.margins.left).toBeCloseTo((W - w) / 2, 6);
    expect(fit.margins.right).toBeCloseTo((W - w) / 2, 6);
    expect(fit.margins.top).toBeCloseTo((H - h) / 2, 6);
    expect(fit.margins.bottom).toBeCloseTo((H - h) / 2, 6);
    expect(fit.centre.x).toBeCloseTo(W / 2, 6);
    expect(fit.fits).toBe(W >= w && H >= h);
  });

  it.each([[40, 10, 60], [30, 30, 50], [55, 5, 56], [70, 8, 60]])('rectangle %d × %d in a circle of %d: (D − √(w² + h²)) / 2', (w, h, D) => {
    const fit = bestFit(rectangle(w, h), die('oval', D, D));
    expect(Math.abs(fit.borderMm - (D - Math.hypot(w, h)) / 2)).toBeLessThan(ARC_MM);
    expect(fit.centre.x).toBeCloseTo(D / 2, 3);
    expect(fit.centre.y).toBeCloseTo(D / 2, 3);
  });

  it.each([[80, 50], [50, 90], [66, 65]])('the largest rectangle in an oval %d × %d is a√2 × b√2 and has no border', (W, H) => {
    const fit = bestFit(rectangle(W / Math.SQRT2, H / Math.SQRT2), die('oval', W, H));
    expect(Math.abs(fit.borderMm)).toBeLessThan(ARC_MM);
    expect(bestFit(rectangle((W / Math.SQRT2) * 1.02, (H / Math.SQRT2) * 1.02), die('oval', W, H)).fits).toBe(false);
  });

  it.each([[0, 1], [30, Math.sqrt(3) / 2], [60, 1]])('triangle turned by %d° in a regular hexagon: corners against edges or corners', (turnDeg, reach) => {
    // Hexagon of side S, points left and right: apothem S√3/2. A triangle's corner at radius R towards an edge's middle reaches R along
    // that edge's normal, towards a corner of the hexagon R·√3/2 along both normals beside it; three-fold symmetry makes the middle best.
    const S = 30, R = 20;
    const fit = bestFit(regular(3, R, 30), { shape: { kind: 'hexagon', widthMm: 2 * S, heightMm: S * Math.sqrt(3) } }, { turnsDeg: [turnDeg] });
    expect(fit.borderMm).toBeCloseTo((S * Math.sqrt(3)) / 2 - R * reach, 9);
  });

  it('disc in a stadium, in a square and in an arch: half of what is left of the narrower way', () => {
    const disc = dieOutline(die('oval', 20, 20));
    expect(Math.abs(bestFit(disc, die('stadium', 80, 36)).borderMm - 8)).toBeLessThan(ARC_MM);
    expect(Math.abs(bestFit(disc, die('rectangle', 50, 50)).borderMm - 15)).toBeLessThan(ARC_MM);
    // Arch 60 wide with a half circle over 40 of straight side: the circle of radius 30 fits, so 30 − 10 is left.
    const arch = bestFit(disc, { shape: { kind: 'arch', widthMm: 60, heightMm: 70 } });
    expect(Math.abs(arch.borderMm - 20)).toBeLessThan(ARC_MM);
    // All centres between 30 and 40 from the top do; the one nearest to equal margins stands at the middle of the height.
    expect(arch.centre.y).toBeCloseTo(35, 3);
  });

  it('keeps the stitch line: the border grows smaller by exactly the inset', () => {
    for (const shape of [{ kind: 'rectangle', widthMm: 60, heightMm: 30, cornerRadiusMm: 4 }, { kind: 'oval', widthMm: 60, heightMm: 30 }, { kind: 'hexagon', widthMm: 60, heightMm: 30 }] as const) {
      const free = bestFit(rectangle(30, 6), { shape }).borderMm;
      expect(bestFit(rectangle(30, 6), { shape, stitchInsetMm: 2 }).borderMm).toBeCloseTo(free - 2, 6);
    }
  });

  it('takes the earliest of equally good turns, and a later one that is better', () => {
    expect(bestFit(rectangle(20, 8), die('rectangle', 40, 30), { turnsDeg: [180, 0] }).rotationDeg).toBe(180);
    expect(bestFit(rectangle(20, 8), die('rectangle', 30, 60), { turnsDeg: [0, 90, 180, 270] })).toMatchObject({ rotationDeg: 90 });
    expect(bestFit(rectangle(20, 8), die('rectangle', 30, 60), { turnsDeg: [] }).rotationDeg).toBe(0);
  });

  it('uses the ink, not its box: a slanted stroke nestles where its box would not', () => {
    const stroke: Outline = { rings: [[{ x: 0, y: 20 }, { x: 40, y: 0 }]] };
    const box = bestFit(rectangle(40, 20), die('oval', 60, 40)).borderMm;
    const ink = bestFit(stroke, die('oval', 60, 40), { turnsDeg: [26.565] }).borderMm;
    expect(ink).toBeGreaterThan(box + 1);
  });

  it('is the same wherever the artwork lies, and turns with the label', () => {
    const ink: Outline = { rings: [[{ x: 0, y: 0 }, { x: 31, y: 4 }, { x: 17, y: 12 }, { x: 3, y: 9 }]] };
    const label = dieOutline(die('oval', 55, 35));
    const fit = bestFit(ink, { shape: { kind: 'outline', outline: label } });
    const moved = bestFit(translateOutline(ink, -210.5, 93.25), { shape: { kind: 'outline', outline: label } });
    const turned = bestFit(rotateOutline(ink, 90), { shape: { kind: 'outline', outline: rotateOutline(label, 90) } });
    expect(moved.borderMm).toBeCloseTo(fit.borderMm, 9);
    expect(moved.centre.x).toBeCloseTo(fit.centre.x, 6);
    expect(turned.borderMm).toBeCloseTo(fit.borderMm, 9);
    expect(turned.centre.x).toBeCloseTo(35 - fit.centre.y, 6);
    expect(turned.centre.y).toBeCloseTo(fit.centre.x, 6);
  });
});

describe('degenerate input', () => {
  it('fits a single point at the middle of the largest circle', () => {
    const fit = bestFit({ rings: [[{ x: 7, y: 7 }]] }, die('rectangle', 50, 20));
    expect(fit).toMatchObject({ borderMm: 10, centre: { x: 25, y: 10 } });
  });

  it('refuses artwork without points or with points that are no numbers, and dies that cannot be drawn', () => {
    expect(() => bestFit({ rings: [] }, die('rectangle', 5, 5))).toThrow('without points');
    expect(() => bestFit({ rings: [[{ x: NaN, y: 0 }]] }, die('rectangle', 5, 5))).toThrow('NaN');
    expect(() => bestFit(rectangle(1, 1), die('rectangle', -5, 5))).toThrow('Width');
    expect(() => bestFit(rectangle(1, 1), die('rectangle', 10, 5), { turnsDeg: [Infinity] })).toThrow('Infinity');
  });

  it('says no, with a border below 0, where the stitch line leaves nothing', () => {
    const narrow = die('rectangle', 40, 8, { stitchInsetMm: 5 });
    expect(usableOutline(narrow).rings).toEqual([]);
    const fit = bestFit(rectangle(4, 2), narrow);
    expect(fit).toMatchObject({ fits: false, verdict: 'no' });
    expect(fit.borderMm).toBeCloseTo(3 - 5, 9);
  });

  it('tells how far the edges would have to move where ink does not fit', () => {
    expect(bestFit(rectangle(50, 10), die('rectangle', 40, 30)).borderMm).toBeCloseTo(-5, 9);
  });
});

describe('fit table', () => {
  const dies = [[90, 70], [60, 40], [46, 18], [44, 13], [42, 12], [30, 10]].map(([w, h]) => die('rectangle', w, h));
  const [row] = fitTable([rectangle(40, 10)], dies);

  it('gives each pair the same figures as a fit of its own', () => {
    dies.forEach((d, i) => expect({ ...row[i], verdict: '' }).toEqual({ ...bestFit(rectangle(40, 10), d), verdict: '' }));
  });

  it('calls a good fit roomy where a smaller die is good too, and recommends the smallest good one', () => {
    expect(row.map((fit) => fit.verdict)).toEqual(['roomy', 'roomy', 'good', 'snug', 'tight', 'no']);
    expect(bestFit(rectangle(40, 10), dies[0]).verdict).toBe('good');
    const areas = dies.map((d) => outlineArea(dieOutline(d)));
    expect(recommendedDie(row, areas)).toBe(2);
    expect(recommendedDie(row.slice(3), areas.slice(3))).toBe(0);
    expect(recommendedDie(row.slice(5), areas.slice(5))).toBeNull();
  });

  it('takes the limits of the studio', () => {
    expect(bestFit(rectangle(40, 10), dies[2], { goodMm: 5, snugMm: 4 }).verdict).toBe('tight');
    expect(bestFit(rectangle(40, 10), dies[2], { goodMm: 3 }).verdict).toBe('good');
  });
});

describe('cut lines', () => {
  it('have exactly the box that was asked for', () => {
    const box = outlineBox(dieOutline({ shape: { kind: 'rectangle', widthMm: 63.5, heightMm: 38.1, cornerRadiusMm: 5 } }));
    expect(box).toEqual({ x: 0, y: 0, w: 63.5, h: 38.1 });
    expect(outlineBox(dieOutline(die('oval', 63.5, 38.1)))).toEqual({ x: 0, y: 0, w: 63.5, h: 38.1 });
  });
});
