/** Distances, offsets and arcs against plain loops over all edges and against circles. */
import { describe, expect, it } from 'vitest';
import { ARC_TOLERANCE_MM, circleArc, ellipseArc } from '../../server/engine/geometry/arc.ts';
import { DistanceField } from '../../server/engine/geometry/distance-field.ts';
import { growOutline, insetOutline, isConvexRing, tidyOutline } from '../../server/engine/geometry/offset.ts';
import { outlineArea, outlineBox, outlineContains } from '../../server/engine/geometry/ring.ts';
import type { Outline } from '../../server/engine/geometry/types.ts';
import { pointToSegment, randomStar, seeded, segmentsOf } from './fit-brute-force.ts';

const square = (size: number, x = 0, y = 0): Outline => ({ rings: [[{ x, y }, { x: x + size, y }, { x: x + size, y: y + size }, { x, y: y + size }]] });

describe('distance field', () => {
  it('gives the distance to the nearest of all edges, above 0 inside, at any point near and far', () => {
    for (let seed = 1; seed <= 12; seed++) {
      const random = seeded(seed);
      const outline = randomStar(random, 5 + seed * 12, 60, 40, 0.3);
      // A window, and something beside.
      outline.rings.push(square(3, 28, 18).rings[0], square(6, 70, 5).rings[0]);
      const field = new DistanceField(outline), edges = segmentsOf(outline);
      for (let i = 0; i < 400; i++) {
        const p = i % 5 === 0 ? { x: (random() - 0.5) * 900, y: (random() - 0.5) * 900 } : { x: random() * 90 - 10, y: random() * 60 - 10 };
        const plain = Math.min(...edges.map((e) => pointToSegment(p, e)));
        expect(field.signed(p.x, p.y)).toBeCloseTo(outlineContains(outline, p) ? plain : -plain, 9);
      }
    }
  });

  it('knows every edge that can be nearest within a reach', () => {
    const random = seeded(5), outline = randomStar(random, 80, 60, 40, 0.3), field = new DistanceField(outline);
    let few = 0;
    for (let i = 0; i < 300; i++) {
      const x = random() * 60, y = random() * 40, near = field.candidatesWithin(x, y, 0.4);
      if (near.length < 40) few++;
      for (let k = 0; k < 12; k++) {
        const p = { x: x + 0.4 * Math.cos(k), y: y + 0.4 * Math.sin(k) };
        expect(Math.sqrt(Math.min(...[...near].map((e) => field.distSq(e, p.x, p.y))))).toBeCloseTo(Math.abs(field.signed(p.x, p.y)), 9);
      }
    }
    expect(few).toBeGreaterThan(150);
  });

  it('takes points and strokes, which have no inside', () => {
    expect(new DistanceField({ rings: [[{ x: 3, y: 4 }]] }).signed(0, 0)).toBe(-5);
    expect(new DistanceField({ rings: [[{ x: 0, y: 0 }, { x: 10, y: 0 }]] }).signed(4, 2)).toBe(-2);
  });
});

describe('offsets', () => {
  const circle: Outline = { rings: [circleArc({ x: 50, y: 50 }, 30, 0, 360).slice(0, -1)] };

  it('shrink a flattened circle to a circle, and exactly where the ring is convex', () => {
    for (const p of insetOutline(circle, 12).rings[0]) expect(Math.abs(Math.hypot(p.x - 50, p.y - 50) - 18)).toBeLessThan(0.011);
    expect(insetOutline(square(20), 3).rings).toEqual([[{ x: 3, y: 3 }, { x: 17, y: 3 }, { x: 17, y: 17 }, { x: 3, y: 17 }]]);
    expect(insetOutline(square(20), 10).rings).toEqual([]);
    expect(insetOutline(square(20), 25).rings).toEqual([]);
  });

  it('grow with round corners, shrink a concave corner to an arc, both within 0.02 mm', () => {
    const grown = growOutline(square(20), 5);
    expect(Math.abs(outlineArea(grown) - (400 + 4 * 100 + Math.PI * 25))).toBeLessThan(0.3);
    expect(outlineBox(grown)).toEqual({ x: -5, y: -5, w: 30, h: 30 });
    const random = seeded(3), star = randomStar(random, 15, 60, 40, 0.5), edges = segmentsOf(star);
    for (const inset of [0.004, 0.5, 2, 4]) {
      for (const p of insetOutline(star, inset).rings.flat()) expect(Math.abs(Math.min(...edges.map((e) => pointToSegment(p, e))) - inset)).toBeLessThan(0.02);
    }
  });

  it('resolve rings that overlap even-odd, and tell convex rings from others', () => {
    expect(outlineArea(tidyOutline({ rings: [square(10).rings[0], square(10, 5, 5).rings[0]] }))).toBeCloseTo(150, 6);
    expect(isConvexRing(square(5).rings[0])).toBe(true);
    expect(isConvexRing([...square(5).rings[0]].reverse())).toBe(true);
    expect(isConvexRing([{ x: 0, y: 0 }, { x: 9, y: 0 }, { x: 2, y: 2 }, { x: 0, y: 9 }])).toBe(false);
    // A pentagram turns one way only, but twice round.
    expect(isConvexRing([0, 2, 4, 1, 3].map((k) => ({ x: Math.cos((k * 2 * Math.PI) / 5), y: Math.sin((k * 2 * Math.PI) / 5) })))).toBe(false);
    expect(() => growOutline(square(5), -1)).toThrow('-1');
  });
});

describe('arcs', () => {
  it('keep their chords within the tolerance and have the quadrant points', () => {
    const arc = ellipseArc({ x: 0, y: 0 }, 40, 25, -30, 300);
    for (let i = 1; i < arc.length; i++) {
      const x = (arc[i].x + arc[i - 1].x) / 2, y = (arc[i].y + arc[i - 1].y) / 2;
      // Radial miss of the chord's middle, at most the tolerance stretched by nothing.
      const share = Math.hypot(x / 40, y / 25);
      expect((1 - share) * 40).toBeLessThan(ARC_TOLERANCE_MM * 1.01);
    }
    for (const q of [{ x: 40, y: 0 }, { x: 0, y: 25 }, { x: -40, y: 0 }, { x: 0, y: -25 }]) expect(arc.some((p) => p.x === q.x && p.y === q.y)).toBe(true);
    expect(circleArc({ x: 1, y: 2 }, 0, 0, 90).every((p) => p.x === 1 && p.y === 2)).toBe(true);
    const back = circleArc({ x: 0, y: 0 }, 5, 90, -90);
    expect(back[0]).toEqual({ x: 0, y: 5 });
    expect(back[back.length - 1]).toEqual({ x: 5, y: 0 });
  });
});
