import GeometryFactory from 'jsts/org/locationtech/jts/geom/GeometryFactory.js';
import Coordinate from 'jsts/org/locationtech/jts/geom/Coordinate.js';
import DistanceOp from 'jsts/org/locationtech/jts/operation/distance/DistanceOp.js';
import { describe, expect, it } from 'vitest';
import { convexSeparation, distanceToConvex, growConvex, minkowskiSum, noFitPolygon, perimeter } from '../../server/engine/geometry/convex.ts';
import { convexHull } from '../../server/engine/geometry/hull.ts';
import { signedArea } from '../../server/engine/geometry/ring.ts';
import type { Ring } from '../../server/engine/geometry/types.ts';

const box = (x: number, y: number, w: number, h: number): Ring => [{ x, y }, { x: x + w, y }, { x: x + w, y: y + h }, { x, y: y + h }];

/** Small repeatable generator (mulberry32). */
function random(seed: number): () => number {
  return () => {
    seed = (seed + 0x6d2b79f5) | 0;
    let t = Math.imul(seed ^ (seed >>> 15), 1 | seed);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}
function randomHull(next: () => number, n: number): Ring {
  const [x, y, w, h] = [next() * 60, next() * 60, 5 + next() * 30, 5 + next() * 30];
  return convexHull(Array.from({ length: n }, () => ({ x: x + next() * w, y: y + next() * h })));
}

const factory = new GeometryFactory();
const polygon = (ring: Ring) => factory.createPolygon(factory.createLinearRing([...ring, ring[0]].map((p) => new Coordinate(p.x, p.y))));

describe('separation of convex polygons', () => {
  it('is the distance of boxes apart, side by side and corner to corner', () => {
    expect(convexSeparation(box(0, 0, 10, 10), box(13, 2, 5, 5))).toBeCloseTo(3, 12);
    expect(convexSeparation(box(0, 0, 10, 10), box(13, 14, 5, 5))).toBeCloseTo(5, 12);
  });

  it('is minus the least shift that parts boxes that overlap', () => {
    expect(convexSeparation(box(0, 0, 10, 10), box(8, 1, 10, 5))).toBeCloseTo(-2, 12);
    expect(convexSeparation(box(0, 0, 10, 10), box(4, 4, 2, 2))).toBeCloseTo(-6, 12);
    expect(convexSeparation(box(0, 0, 10, 10), box(10, 0, 10, 10))).toBeCloseTo(0, 12);
  });

  it('agrees with the distance that jsts finds on random hulls, either way round', () => {
    const next = random(7);
    let apart = 0;
    for (let i = 0; i < 300; i++) {
      const a = randomHull(next, 12), b = randomHull(next, 9);
      const mine = convexSeparation(a, b);
      const theirs = DistanceOp.distance(polygon(a), polygon(b)) as number;
      if (theirs > 0) {
        apart++;
        expect(mine).toBeCloseTo(theirs, 9);
      } else expect(mine).toBeLessThanOrEqual(1e-9);
      expect(convexSeparation(b, a)).toBeCloseTo(mine, 9);
    }
    expect(apart).toBeGreaterThan(100);
  });

  it('shifting by the depth along some direction just parts them', () => {
    const next = random(11);
    for (let i = 0; i < 100; i++) {
      const a = randomHull(next, 10), b = randomHull(next, 10);
      const depth = -convexSeparation(a, b);
      if (depth <= 0) continue;
      const parted = Array.from({ length: 3600 }, (_, k) => (k * Math.PI) / 1800).some((t) => convexSeparation(a, b.map((p) => ({ x: p.x + (depth + 1e-3) * Math.cos(t), y: p.y + (depth + 1e-3) * Math.sin(t) }))) >= -2e-3);
      expect(parted).toBe(true);
    }
  });
});

describe('Minkowski sum', () => {
  it('of two boxes is a box, and its corners do not repeat', () => {
    expect(minkowskiSum(box(0, 0, 2, 3), box(1, 1, 4, 5))).toEqual(box(1, 1, 6, 8));
  });

  it('has the hull of all sums of corners', () => {
    const next = random(3);
    for (let i = 0; i < 50; i++) {
      const a = randomHull(next, 8), b = randomHull(next, 8);
      const byPairs = convexHull(a.flatMap((p) => b.map((q) => ({ x: p.x + q.x, y: p.y + q.y }))));
      const sum = minkowskiSum(a, b);
      expect(Math.abs(signedArea(sum))).toBeCloseTo(signedArea(byPairs), 6);
      for (const p of byPairs) expect(Math.abs(distanceToConvex(sum, p.x, p.y))).toBeLessThan(1e-9);
    }
  });

  it('serves points and segments too', () => {
    expect(noFitPolygon([{ x: 1, y: 1 }], [{ x: 0, y: 0 }])).toEqual([{ x: 1, y: 1 }]);
    expect(convexSeparation([{ x: 0, y: 0 }, { x: 4, y: 0 }], [{ x: 2, y: 3 }])).toBeCloseTo(3, 12);
  });
});

describe('a grown convex ring', () => {
  it('keeps its edges at the distance and holds the rounded shape', () => {
    const grown = growConvex(box(0, 0, 10, 6), 2);
    expect(signedArea(grown)).toBeCloseTo(14 * 10, 9);
    const triangle: Ring = convexHull([{ x: 0, y: 0 }, { x: 30, y: 2 }, { x: 0, y: 4 }]);
    const around = growConvex(triangle, 3);
    for (const p of around) expect(distanceToConvex(triangle, p.x, p.y)).toBeGreaterThanOrEqual(3 - 1e-9);
    expect(signedArea(around)).toBeGreaterThan(signedArea(triangle) + perimeter(triangle) * 3 + Math.PI * 9);
  });
});
