import { describe, expect, it } from 'vitest';
import { boxOverlap, matchBoxes } from '../../server/engine/geometry/box-match.ts';

const box = (x: number, y: number, w: number, h: number) => ({ x, y, w, h });

describe('overlap of two boxes', () => {
  it('is the shared area over the joint area (by hand: 2×2 and 2×2 shifted by 1: 2 / 6)', () => {
    expect(boxOverlap(box(0, 0, 2, 2), box(1, 0, 2, 2))).toBeCloseTo(1 / 3, 12);
  });
  it('is 0 for boxes that only touch and 1 for equal ones, also without area', () => {
    expect(boxOverlap(box(0, 0, 1, 1), box(1, 0, 1, 1))).toBe(0);
    expect(boxOverlap(box(3, 3, 0, 4), box(3, 3, 0, 4))).toBe(1);
  });
});

describe('boxes paired over a change', () => {
  const words = [box(0, 0, 30, 10), box(0, 12, 20, 10), box(60, 0, 30, 10)];

  it('keep their partners in any order', () => {
    expect(matchBoxes(words, [words[2], words[0], words[1]], 0.1)).toEqual([2, 0, 1]);
  });
  it('give a joined box to the larger of its two, and the rest stay', () => {
    expect(matchBoxes(words, [box(0, 0, 30, 22), words[2]], 0.1)).toEqual([0, 2]);
  });
  it('give the larger piece of a split its partner and the other none', () => {
    expect(matchBoxes([words[0]], [box(0, 0, 8, 10), box(10, 0, 20, 10)], 0.1)).toEqual([null, 0]);
  });
  it('never lose an unchanged box to a neighbour that grew over it', () => {
    expect(matchBoxes([words[0]], [box(0, 0, 31, 10), words[0]], 0.1)).toEqual([null, 0]);
  });
  it('are none below the least overlap, and none of none', () => {
    expect(matchBoxes([box(0, 0, 10, 10)], [box(9, 9, 10, 10)], 0.1)).toEqual([null]);
    expect(matchBoxes([], [words[0]], 0.1)).toEqual([null]);
    expect(matchBoxes(words, [], 0.1)).toEqual([]);
  });
});
