import { describe, expect, it } from 'vitest';
import { insidePoint } from '../../server/engine/geometry/inside-point.ts';
import { outlineContains } from '../../server/engine/geometry/ring.ts';
import { rotateOutline } from '../../server/engine/geometry/transform.ts';
import type { Outline } from '../../server/engine/geometry/types.ts';

const ring = (...xy: number[]) => Array.from({ length: xy.length / 2 }, (_, i) => ({ x: xy[2 * i], y: xy[2 * i + 1] }));
const square: Outline = { rings: [ring(0, 0, 10, 0, 10, 10, 0, 10)] };
const frame: Outline = { rings: [...square.rings, ring(2, 2, 9, 2, 9, 9, 2, 9)] };
/** A C: open to the right; its centroid lies in the opening. */
const c: Outline = { rings: [ring(0, 0, 10, 0, 10, 1, 1, 1, 1, 9, 10, 9, 10, 10, 0, 10)] };

describe('a point inside an outline', () => {
  it('of a square is on its middle line (by hand)', () => {
    expect(insidePoint(square)).toEqual({ x: 5, y: 4.973 });
  });
  it.each([['frame', frame], ['C', c], ['square', square]])('lies in the ink of a %s however it is turned', (_, outline) => {
    for (let deg = 0; deg < 360; deg += 7) {
      const turned = rotateOutline(outline, deg);
      expect(outlineContains(turned, insidePoint(turned)), `${deg}°`).toBe(true);
    }
  });
  it('of a figure without area is its first point; of nothing there is none', () => {
    expect(insidePoint({ rings: [ring(3, 4, 8, 4)] })).toEqual({ x: 3, y: 4 });
    expect(() => insidePoint({ rings: [] })).toThrow(RangeError);
  });
});
