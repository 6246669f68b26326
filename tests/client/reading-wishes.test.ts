import { describe, expect, it } from 'vitest';
import type { Reading, ReadPart } from '../../server/engine/reading/types.ts';
import { regroup } from '../../server/engine/reading/grouping.ts';
import { changeScale, cutAlong, joinSentiments, removeCorrection, sameWishes, setAside, takeBack, wishedReading } from '../../src/stores/reading-wishes.ts';
import type { Wishes } from '../../src/stores/reading-wishes.ts';

/** Three squares of 40 px in a row, 100 px apart, as a reading without scale. */
function threeSquares(): Reading {
  const part = (id: number): ReadPart => {
    const x = 20 + id * 140, y = 30;
    return { id, boxPx: { x, y, w: 40, h: 40 }, areaPx2: 1600, areaMm2: null, outlinePx: { rings: [[{ x, y }, { x: x + 40, y }, { x: x + 40, y: y + 40 }, { x, y: y + 40 }]] }, thinnestStrokeMm: null };
  };
  const bare: Reading = { widthPx: 400, heightPx: 100, pxToMm: null, mmPerPx: null, scaleSource: null, groupingGapMm: null, groupingGapPx: 50, parts: [part(0), part(1), part(2)], links: [], sentiments: [], warnings: [] };
  return regroup(bare, 50, { joins: [], splits: [], setAside: [] });
}
const start: Wishes = { scale: { kind: 'file' }, groupingGap: 50, corrections: { joins: [], splits: [], setAside: [] } };
const base = threeSquares();
const groups = (wishes: Wishes) => wishedReading(base, wishes).reading.sentiments.map(({ partIds }) => [...partIds].sort());

describe('what a person wishes of a reading', () => {
  it('joins, and takes the join away again', () => {
    const joined = joinSentiments(start, base.sentiments.slice(0, 2), base.parts);
    expect(groups(joined)).toEqual([[0, 1], [2]]);
    expect(groups(removeCorrection(joined, 'joins', 0))).toEqual([[0], [1], [2]]);
    expect(start.corrections.joins).toEqual([]);
  });
  it('cuts through the middle of ink', () => {
    const cut = cutAlong(start, { x: 40, y: 0 }, { x: 40, y: 100 });
    expect(wishedReading(base, cut).reading.sentiments).toHaveLength(4);
  });
  it('sets aside and takes back the very same', () => {
    const without = setAside(start, [base.sentiments[1]], base.parts);
    const { reading, aside, asideParts } = wishedReading(base, without);
    expect(reading.sentiments.map(({ partIds }) => partIds)).toEqual([[0], [2]]);
    expect(aside.map(({ partIds }) => partIds)).toEqual([[1]]);
    expect(takeBack(without, aside[0], asideParts)).toEqual(start);
  });
  it('keeps the width of the gap in the picture when a scale is given: 50 px at 254 dpi are 5 mm', () => {
    expect(changeScale(start, { kind: 'typed', dpi: 254 }, base).groupingGap).toBeCloseTo(5, 9);
  });
  it('is the same whatever the order of its keys', () => {
    const cut = cutAlong(start, { x: 1, y: 2 }, { x: 3, y: 4 });
    const other: Wishes = { corrections: { setAside: [], splits: [{ to: { y: 4, x: 3 }, from: { y: 2, x: 1 } }], joins: [] }, groupingGap: 50, scale: { kind: 'file' } };
    expect(sameWishes(cut, other)).toBe(true);
    expect(sameWishes(cut, start)).toBe(false);
  });
});
