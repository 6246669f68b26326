import { describe, expect, it } from 'vitest';
import { readStampSheet } from '../../server/engine/reading/index.ts';
import { drawLettering } from '../benchmarks/corpus/lettering.ts';
import { frame, heart, rule } from '../benchmarks/corpus/ornaments.ts';
import { blur, grain, toJpeg, toPng } from '../benchmarks/corpus/picture-maker.ts';
import { seeded } from '../benchmarks/corpus/random.ts';
import { renderSheet, type Painted } from '../benchmarks/corpus/render.ts';
import type { Ring } from '../../server/engine/geometry/types.ts';

const PX_PER_MM = 8, DPI = 25.4 * PX_PER_MM;
const at = (rings: Ring[], x: number, y: number) => rings.map((ring) => ring.map((p) => ({ x: p.x + x, y: p.y + y })));
const box = (w: number, h: number): Ring => [{ x: 0, y: 0 }, { x: w, y: 0 }, { x: w, y: h }, { x: 0, y: h }];

const one = drawLettering({ font: 'lora', lines: ['Happy Birthday'], sizeMm: 8 }), two = drawLettering({ font: 'quicksand', lines: ['thank you', 'so much'], sizeMm: 7 });
const words = (fill: string, dx = 0, dy = 0): Painted[] => [{ fill, rings: at(one.rings, 8 + dx, 8 + dy) }, { fill, rings: at(two.rings, 8 + dx, 30 + dy) }];

/** As a scanner gives it: a little blur, grain, JPEG. */
async function scan(painted: Painted[], paper: string, w = 90, h = 60): Promise<Uint8Array> {
  const raster = renderSheet(w, h, PX_PER_MM, painted, paper);
  blur(raster, 0.7);
  grain(seeded(3), raster, 3);
  return toJpeg(raster, 85);
}

async function expectBoth(file: Uint8Array): Promise<void> {
  const { sentiments } = await readStampSheet(file, { dpi: DPI });
  expect(sentiments.map((s) => [s.widthMm, s.heightMm])).toEqual([one, two].map(({ box: b }) => [expect.closeTo(b.w, 0), expect.closeTo(b.h, 0)]));
  sentiments.forEach((s, i) => expect(Math.abs(s.widthMm! - [one, two][i].box.w)).toBeLessThan(0.2));
}

// Reference: glyph boxes from the font files (opentype.js), drawn by resvg.
describe('ink and paper', () => {
  it.each([
    ['black on white', '#1d1b1a', '#fafafa'], ['light grey on white', '#b5b5b5', '#fafafa'], ['pale yellow on white', '#f2df6b', '#fbfbf8'], ['red on kraft', '#b3202a', '#c9a878'],
    ['white on kraft', '#fbfaf5', '#b8935f'], ['white on dark card', '#eee8dd', '#2b3036'],
  ])('%s', async (_, ink, paper) => expectBoth(await scan(words(ink), paper)));

  it('black and pale blue ink on one sheet', async () => {
    await expectBoth(await scan([words('#222')[0], words('#9bb8d8')[1]], '#fafafa'));
  });

  it('on a transparent ground, black or white', async () => {
    for (const fill of ['#111', '#fff']) await expectBoth(await toPng(renderSheet(90, 60, PX_PER_MM, words(fill), null)));
  });

  it('cropped to the ink itself', async () => {
    const { sentiments } = await readStampSheet(await toPng(renderSheet(one.box.w, one.box.h, PX_PER_MM, [{ fill: '#111', rings: one.rings }], '#fff')), { dpi: DPI });
    expect(sentiments.map((s) => s.widthMm)).toEqual([expect.closeTo(one.box.w, 0)]);
  });

  it('a large solid heart and a solid label with words cut out are ink, not paper', async () => {
    const big = await readStampSheet(await scan([{ fill: '#b22', rings: at([heart(60)], 45, 30) }], '#faf8f2'), { dpi: DPI });
    expect(big.sentiments.map((s) => s.widthMm)).toEqual([expect.closeTo(60, 0)]);
    const label = await readStampSheet(await scan([{ fill: '#222', rings: at([box(70, 20)], 8, 8) }, { fill: '#faf8f2', rings: at(one.rings, 14, 13) }], '#faf8f2'), { dpi: DPI });
    expect(label.sentiments.map((s) => [s.widthMm, s.heightMm])).toEqual([[expect.closeTo(70, 0), expect.closeTo(20, 0)]]);
  });

  it('hairlines of a tenth of a millimetre', async () => {
    const lines = Array.from({ length: 5 }, (_, i): Painted => ({ fill: '#222', rings: at([rule(40, 0.1 + i * 0.02)], 10, 10 + i * 1.2) }));
    const { sentiments } = await readStampSheet(await scan(lines, '#fafafa'), { dpi: DPI });
    expect(sentiments).toHaveLength(1);
    expect(sentiments[0]).toMatchObject({ widthMm: expect.closeTo(40, 0), heightMm: expect.closeTo(5, 0), angleDeg: 0 });
  });
});

describe('the paper’s edge is no sentiment', () => {
  it.each([['kraft', '#c19a63', '#222'], ['dark', '#26292d', '#f4f1ea']])('%s card on a white lid', async (_, card, ink) => {
    await expectBoth(await scan([{ fill: card, rings: at([box(90, 60)], 8, 8) }, ...words(ink, 8, 8)], '#fbfbfb', 106, 76));
  });

  it('the shadow along two edges of a card as light as the lid', async () => {
    const shadow: Ring = [{ x: 90, y: 0.5 }, { x: 90.4, y: 0.5 }, { x: 90.4, y: 60.4 }, { x: 0.5, y: 60.4 }, { x: 0.5, y: 60 }, { x: 90, y: 60 }];
    await expectBoth(await scan([{ fill: '#f1eee6', rings: at([box(90, 60)], 12, 14) }, { fill: '#c9c6c0', rings: at([shadow], 12, 14) }, ...words('#222', 12, 14)], '#fbfbfb', 120, 90));
  });

  it('a frame round words belongs to them, also along the picture’s edges', async () => {
    const { sentiments } = await readStampSheet(await scan([...words('#222'), { fill: '#222', evenOdd: true, rings: at(frame(86, 56, 0.6), 2, 2) }], '#fafafa'), { dpi: DPI });
    expect(Math.max(...sentiments.map((s) => s.widthMm!))).toBeCloseTo(86, 0);
  });
});
