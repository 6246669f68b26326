import { describe, expect, it } from 'vitest';
import { convexHull } from '../../server/engine/geometry/hull.ts';
import { signedArea } from '../../server/engine/geometry/ring.ts';
import { rotatePoint } from '../../server/engine/geometry/transform.ts';

describe('convex hull', () => {
  it('keeps the four corners of a square and drops points inside and on its edges', () => {
    const square = [{ x: 0, y: 0 }, { x: 2, y: 0 }, { x: 2, y: 2 }, { x: 0, y: 2 }];
    expect(convexHull([...square, { x: 1, y: 1 }, { x: 1, y: 0 }, { x: 0, y: 1.5 }])).toEqual(square);
  });

  it('runs clockwise as seen on the page, which is positive area with y down', () => {
    const points = Array.from({ length: 40 }, (_, i) => rotatePoint({ x: 10 + (i % 3), y: 0 }, i * 9));
    expect(signedArea(convexHull(points))).toBeGreaterThan(0);
  });

  it('gives a point for one place and two ends for a line', () => {
    expect(convexHull([{ x: 3, y: 4 }, { x: 3, y: 4 }])).toEqual([{ x: 3, y: 4 }]);
    expect(convexHull([{ x: 0, y: 0 }, { x: 1, y: 1 }, { x: 3, y: 3 }])).toEqual([{ x: 0, y: 0 }, { x: 3, y: 3 }]);
  });
});
