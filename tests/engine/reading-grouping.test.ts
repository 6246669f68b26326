import { beforeAll, describe, expect, it } from 'vitest';
import { outlineArea, outlineBox } from '../../server/engine/geometry/ring.ts';
import { applyScale, readStampSheet, regroup, type Corrections, type Reading } from '../../server/engine/reading/index.ts';
import { toPng } from '../benchmarks/corpus/picture-maker.ts';
import type { Raster } from '../benchmarks/corpus/render.ts';

type Rectangle = [x: number, y: number, w: number, h: number];
const none: Corrections = { joins: [], splits: [], setAside: [] };

function rectangles(width: number, height: number, ...boxes: Rectangle[]): Raster {
  const rgba = new Uint8Array(4 * width * height).fill(255);
  for (const [x, y, w, h] of boxes) for (let j = y; j < y + h; j++) for (let i = x; i < x + w; i++) rgba.fill(0, 4 * (j * width + i), 4 * (j * width + i) + 3);
  return { width, height, rgba };
}

/** 10 px a millimetre. Two words of three letters, 1 mm between letters and 6 mm between the words; a bar 8 mm below them. */
const letters: Rectangle[] = [[50, 50, 20, 40], [80, 50, 20, 40], [110, 50, 20, 40], [190, 50, 20, 40], [220, 50, 20, 40], [250, 50, 20, 40], [50, 170, 220, 20]];

describe('regrouping', () => {
  let reading: Reading;
  beforeAll(async () => { reading = await readStampSheet(await toPng(rectangles(400, 300, ...letters)), { dpi: 254 }); });
  const sizes = (r: Reading) => r.sentiments.map((s) => s.partIds.length).sort();

  it('cuts the tree at the gap, which comes back in mm and px', () => {
    expect(sizes(regroup(reading, 5, none))).toEqual([1, 3, 3]);
    expect(sizes(regroup(reading, 7, none))).toEqual([1, 6]);
    expect(sizes(regroup(reading, 9, none))).toEqual([7]);
    expect(sizes(regroup(reading, 0.5, none))).toEqual([1, 1, 1, 1, 1, 1, 1]);
    expect(regroup(reading, 5, none)).toMatchObject({ groupingGapMm: 5, groupingGapPx: expect.closeTo(50, 9) });
  });

  it('never changes what it is given', () => {
    const before = JSON.stringify(reading);
    regroup(reading, 3, { joins: [[{ x: 60, y: 60 }, { x: 200, y: 60 }]], splits: [{ from: { x: 0, y: 70 }, to: { x: 400, y: 70 } }], setAside: [{ x: 100, y: 180 }] });
    expect(JSON.stringify(reading)).toBe(before);
  });

  it('joins by places: the parts nearest to them', () => {
    const joined = regroup(reading, 5, { ...none, joins: [[{ x: 45, y: 45 }, { x: 275, y: 95 }]] });
    expect(sizes(joined)).toEqual([1, 6]);
  });

  it('a split line cuts the links that it crosses', () => {
    const split = regroup(reading, 7, { ...none, splits: [{ from: { x: 160, y: 30 }, to: { x: 160, y: 110 } }] });
    expect(sizes(split)).toEqual([1, 3, 3]);
    expect(split.parts).toHaveLength(7);
  });

  it('a split line divides a part that it crosses, and gives it back when withdrawn', () => {
    const split = regroup(reading, 5, { ...none, splits: [{ from: { x: 160, y: 160 }, to: { x: 160, y: 200 } }] });
    expect(split.parts).toHaveLength(8);
    const pieces = split.parts.filter((p) => p.dividedFrom !== undefined);
    expect(pieces.map((p) => p.boxPx.w)).toEqual([expect.closeTo(110, 1), expect.closeTo(110, 1)]);
    expect(pieces.every((p) => !reading.parts.some((q) => q.id === p.id))).toBe(true);
    expect(pieces.reduce((sum, p) => sum + p.areaMm2!, 0)).toBeCloseTo(44, 1);
    expect(sizes(split)).toEqual([1, 1, 3, 3]);
    expect(split.links).toHaveLength(7);
    expect(regroup(split, 5, none).parts).toEqual(reading.parts);
  });

  it('a line that ends inside a part divides nothing', () => {
    expect(regroup(reading, 5, { ...none, splits: [{ from: { x: 160, y: 160 }, to: { x: 160, y: 180 } }] }).parts).toHaveLength(7);
  });

  it('what is set aside is no sentiment but stays a part; what hung on it alone falls apart', () => {
    const aside = regroup(reading, 2, { ...none, setAside: [{ x: 90, y: 70 }, { x: 100, y: 180 }] });
    expect(aside.parts).toHaveLength(7);
    expect(aside.links).toHaveLength(6);
    expect(sizes(aside)).toEqual([1, 1, 3]);
  });

  it('is the same in every way when the reading is asked with the corrections at once', async () => {
    const corrections: Corrections = { joins: [[{ x: 60, y: 60 }, { x: 100, y: 180 }]], splits: [{ from: { x: 235, y: 30 }, to: { x: 235, y: 110 } }], setAside: [] };
    const once = await readStampSheet(await toPng(rectangles(400, 300, ...letters)), { dpi: 254, groupingGapMm: 5, corrections });
    expect(once).toEqual(regroup(reading, 5, corrections));
  });

  it('a sentiment has its box, area and outline in mm from its own corner', () => {
    const [first] = regroup(reading, 5, none).sentiments;
    expect(first).toMatchObject({ widthMm: expect.closeTo(8, 2), heightMm: expect.closeTo(4, 2), inkAreaMm2: expect.closeTo(24, 1), angleDeg: 0 });
    expect(outlineBox(first.outline!)).toEqual({ x: 0, y: 0, w: first.widthMm, h: first.heightMm });
    expect(outlineArea(first.outline!)).toBeCloseTo(24, 0);
    expect(first.thinnestStrokeMm).toBeCloseTo(2, 1);
  });

  it('a gap below 0 is refused with its value', () => {
    expect(() => regroup(reading, -1, none)).toThrow('-1');
  });
});

describe('a scale given later', () => {
  it('gives what the reading would have given with it', async () => {
    const file = await toPng(rectangles(400, 300, ...letters));
    const without = await readStampSheet(file, {}), within = await readStampSheet(file, { dpi: 254 });
    expect(without.sentiments.every((s) => s.widthMm === null && s.outline === null)).toBe(true);
    const later = applyScale(without, { dpi: 254 });
    expect(later.warnings).toEqual(within.warnings);
    expect(later.sentiments.map((s) => s.partIds)).toEqual(within.sentiments.map((s) => s.partIds));
    later.sentiments.forEach((s, i) => expect(s.widthMm).toBeCloseTo(within.sentiments[i].widthMm!, 2));
    expect(later.groupingGapMm).toBeCloseTo(within.groupingGapMm!, 2);
  });

  it('a ruler halves and doubles sizes; a gap in px stays where it was', async () => {
    const without = regroup(await readStampSheet(await toPng(rectangles(400, 300, ...letters)), {}), 70, none);
    const ruled = applyScale(without, { ruler: { from: { x: 50, y: 90 }, to: { x: 130, y: 90 }, lengthMm: 16 } });
    expect(ruled).toMatchObject({ mmPerPx: 0.2, scaleSource: 'ruler', groupingGapMm: expect.closeTo(14, 6), groupingGapPx: expect.closeTo(70, 6) });
    expect(ruled.sentiments.map((s) => s.partIds.length).sort()).toEqual([1, 6]);
  });

  it('corners leave out what lies beyond the sheet', async () => {
    const without = await readStampSheet(await toPng(rectangles(400, 300, ...letters)), {});
    const sheet = applyScale(without, { sheet: { cornersPx: [{ x: 30, y: 30 }, { x: 290, y: 30 }, { x: 290, y: 110 }, { x: 30, y: 110 }], widthMm: 26, heightMm: 8 } });
    expect(sheet.sentiments.flatMap((s) => s.partIds)).toHaveLength(6);
  });
});
