import { crc32 } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { outlineBox } from '../../server/engine/geometry/ring.ts';
import { probePicture, readStampSheet } from '../../server/engine/reading/index.ts';
import { applyHomography } from '../../server/engine/reading/homography.ts';
import type { ReadOptions } from '../../server/engine/reading/index.ts';
import { exifSegment, jfifSegment, withPhys, withSegments } from '../benchmarks/corpus/headers.ts';
import { toJpeg, toPng } from '../benchmarks/corpus/picture-maker.ts';
import type { Raster } from '../benchmarks/corpus/render.ts';

type Rectangle = [x: number, y: number, w: number, h: number];

/** Hard black rectangles on white, whole pixels. */
function rectangles(width: number, height: number, ...boxes: Rectangle[]): Raster {
  const rgba = new Uint8Array(4 * width * height).fill(255);
  for (const [x, y, w, h] of boxes) for (let j = y; j < y + h; j++) for (let i = x; i < x + w; i++) rgba.fill(0, 4 * (j * width + i), 4 * (j * width + i) + 3);
  return { width, height, rgba };
}
const read = async (raster: Raster, options: ReadOptions = {}) => readStampSheet(await toPng(raster), options);

describe('places in the picture', () => {
  it('an ink rectangle has its pixels’ outer edges as box and its pixels as area', async () => {
    const reading = await read(rectangles(200, 100, [30, 20, 41, 17], [120, 50, 5, 30]));
    expect(reading.parts.map((p) => p.boxPx)).toEqual([{ x: 30, y: 20, w: 41, h: 17 }, { x: 120, y: 50, w: 5, h: 30 }]);
    expect(reading.parts.map((p) => p.areaPx2)).toEqual([41 * 17, 150]);
    for (const part of reading.parts) expect(outlineBox(part.outlinePx)).toEqual(part.boxPx);
  });

  it('a line one pixel wide is one pixel wide', async () => {
    const reading = await read(rectangles(200, 100, [40, 30, 1, 40], [60, 50, 80, 1]), { dpi: 100 });
    expect(reading.parts.map((p) => p.boxPx)).toEqual([{ x: 40, y: 30, w: 1, h: 40 }, { x: 60, y: 50, w: 80, h: 1 }]);
    expect(reading.parts[0].thinnestStrokeMm).toBeCloseTo(0.254, 2);
  });

  it('an edge pixel of half ink puts the edge at its middle', async () => {
    const raster = rectangles(200, 100, [30, 20, 40, 40]);
    for (let y = 20; y < 60; y++) raster.rgba.fill(128, 4 * (y * 200 + 70), 4 * (y * 200 + 70) + 3);
    const [part] = (await read(raster)).parts;
    expect(part.boxPx.x + part.boxPx.w).toBeCloseTo(70.5, 1);
  });

  it('gaps are the true nearest distances and links a spanning tree', async () => {
    const reading = await read(rectangles(300, 200, [20, 20, 30, 30], [60, 20, 30, 30], [120, 90, 30, 30], [20, 74, 30, 30]), { dpi: 254 });
    expect(reading.links).toHaveLength(3);
    expect(reading.links.map((l) => l.gapPx)).toEqual([expect.closeTo(10, 1), expect.closeTo(24, 1), expect.closeTo(50, 1)]);
    // From (90, 50) to (120, 90): a 3-4-5 triangle; 10 px a millimetre.
    expect(reading.links[2].gapMm).toBeCloseTo(5, 2);
  });

  it('holes stay holes', async () => {
    const raster = rectangles(200, 200, [20, 20, 100, 80]);
    for (let y = 40; y < 60; y++) raster.rgba.fill(255, 4 * (y * 200 + 50), 4 * (y * 200 + 90));
    const [part] = (await read(raster)).parts;
    expect(part.outlinePx.rings).toHaveLength(2);
    expect(part.areaPx2).toBe(100 * 80 - 40 * 20);
  });
});

describe('which way up', () => {
  const upright = rectangles(240, 160, [20, 20, 80, 12], [20, 32, 12, 60], [150, 110, 40, 20]);
  // Where the pixel (x, y) of the upright picture is stored, for each orientation (CIPA DC-008-2019, 4.6.5: what row 0 and column 0 are).
  const stored: Record<number, (x: number, y: number, w: number, h: number) => [number, number]> = {
    1: (x, y) => [x, y], 2: (x, y, w) => [w - 1 - x, y], 3: (x, y, w, h) => [w - 1 - x, h - 1 - y], 4: (x, y, _w, h) => [x, h - 1 - y],
    5: (x, y) => [y, x], 6: (x, y, w) => [y, w - 1 - x], 7: (x, y, w, h) => [h - 1 - y, w - 1 - x], 8: (x, y, _w, h) => [h - 1 - y, x],
  };

  it.each([1, 2, 3, 4, 5, 6, 7, 8])('orientation %i is turned upright', async (orientation) => {
    const { width: w, height: h } = upright, turned = orientation >= 5;
    const raster: Raster = { width: turned ? h : w, height: turned ? w : h, rgba: new Uint8Array(4 * w * h).fill(255) };
    for (let y = 0; y < h; y++) {
      for (let x = 0; x < w; x++) {
        const [i, j] = stored[orientation](x, y, w, h);
        raster.rgba.set(upright.rgba.subarray(4 * (y * w + x), 4 * (y * w + x) + 4), 4 * (j * raster.width + i));
      }
    }
    const file = withSegments(await toJpeg(raster, 95), exifSegment({ orientation }));
    expect(probePicture(file)).toMatchObject({ widthPx: w, heightPx: h, orientation });
    const reading = await readStampSheet(file, {});
    expect([reading.widthPx, reading.heightPx]).toEqual([w, h]);
    const expected = [{ x: 20, y: 20, w: 80, h: 72 }, { x: 150, y: 110, w: 40, h: 20 }];
    reading.parts.forEach((part, i) => (['x', 'y', 'w', 'h'] as const).forEach((k) => expect(part.boxPx[k], `part ${i} ${k}`).toBeCloseTo(expected[i][k], 0)));
  });

  it('stamps’ faces are flipped left to right', async () => {
    const reading = await read(upright, { mirrored: true });
    expect(reading.parts.map((p) => p.boxPx)).toEqual([{ x: 140, y: 20, w: 80, h: 72 }, { x: 50, y: 110, w: 40, h: 20 }]);
  });
});

describe('scale', () => {
  const art = rectangles(300, 200, [50, 50, 100, 40]);

  it.each([[300, 300], [72, null], [96, null]])('a JPEG of %i dpi by JFIF or EXIF has the scale %s', async (dpi, expected) => {
    const jpeg = await toJpeg(art, 90);
    for (const segment of [jfifSegment(dpi), exifSegment({ dpi })]) {
      const reading = await readStampSheet(withSegments(jpeg, segment), {});
      expect(reading.scaleSource).toBe(expected === null ? null : 'file');
      if (expected === null) expect(reading.warnings.map((w) => w.code)).toContain('no-scale');
      else expect(reading.sentiments[0].widthMm).toBeCloseTo((100 * 25.4) / expected, 1);
    }
  });

  it.each([[11811, 'file'], [2835, null], [3780, null]])('a PNG of %i dots per metre has a scale from %s', async (dots, source) => {
    const reading = await readStampSheet(withPhys(await toPng(art), dots, crc32), {});
    expect(reading.scaleSource).toBe(source);
    expect(reading.sentiments[0].widthMm === null).toBe(source === null);
    expect(reading.sentiments[0].boxPx.w).toBe(100);
  });

  it('a density that a camera made up is no scale', async () => {
    const reading = await readStampSheet(withSegments(await toJpeg(art, 90), exifSegment({ dpi: 240, exposure: true })), {});
    expect(reading.scaleSource).toBeNull();
  });

  it('what is typed wins over the file; a ruler and a sheet do too', async () => {
    const file = withPhys(await toPng(art), 11811, crc32);
    expect((await readStampSheet(file, { dpi: 254 })).sentiments[0].widthMm).toBeCloseTo(10, 2);
    const ruled = await readStampSheet(file, { ruler: { from: { x: 50, y: 50 }, to: { x: 150, y: 50 }, lengthMm: 25 } });
    expect(ruled).toMatchObject({ scaleSource: 'ruler', mmPerPx: 0.25 });
    const cornersPx = [{ x: 0, y: 0 }, { x: 300, y: 0 }, { x: 300, y: 200 }, { x: 0, y: 200 }] as const;
    const sheet = await readStampSheet(file, { sheet: { cornersPx: [...cornersPx], widthMm: 60, heightMm: 40 } });
    expect(sheet.scaleSource).toBe('sheet');
    expect(sheet.sentiments[0].widthMm).toBeCloseTo(20, 2);
    expect(applyHomography(sheet.pxToMm!, { x: 300, y: 200 })).toEqual({ x: expect.closeTo(60, 6), y: expect.closeTo(40, 6) });
  });
});

it('a file handed over as a Buffer out of a pool is read alike', async () => {
  const jpeg = Buffer.from(await toJpeg(rectangles(60, 40, [10, 10, 20, 10]), 90));
  const pool = Buffer.concat([Buffer.alloc(100, 7), jpeg, Buffer.alloc(50, 9)]);
  expect((await readStampSheet(pool.subarray(100, 100 + jpeg.length), {})).parts).toHaveLength(1);
});

describe('what cannot be read', () => {
  it('has a stable code and words', async () => {
    const png = await toPng(rectangles(60, 40, [10, 10, 20, 10]));
    await expect(readStampSheet(new TextEncoder().encode('hello'), {})).rejects.toMatchObject({ code: 'unsupported-type' });
    await expect(readStampSheet(new Uint8Array(0), {})).rejects.toMatchObject({ code: 'unsupported-type' });
    await expect(readStampSheet(png.subarray(0, png.length >> 1), {})).rejects.toMatchObject({ code: 'damaged' });
    const jpeg = await toJpeg(rectangles(60, 40, [10, 10, 20, 10]), 90);
    await expect(readStampSheet(jpeg.subarray(0, jpeg.length - 30), {})).rejects.toMatchObject({ code: 'damaged' });
    const huge = new Uint8Array(png);
    new DataView(huge.buffer).setUint32(16, 12_000);
    new DataView(huge.buffer).setUint32(20, 12_000);
    await expect(readStampSheet(huge, {})).rejects.toMatchObject({ code: 'too-large' });
  });

  it.each([[255, 255, 255], [0, 0, 0], [200, 30, 40], [201, 168, 120]])('a page all of colour %i %i %i has no ink', async (r, g, b) => {
    const page = rectangles(300, 200);
    for (let i = 0; i < page.rgba.length; i += 4) page.rgba.set([r, g, b], i);
    await expect(read(page)).rejects.toMatchObject({ code: 'no-ink' });
    await expect(readStampSheet(await toJpeg(page, 85), {})).rejects.toMatchObject({ code: 'no-ink' });
  });
});
