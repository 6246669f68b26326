import { Jimp } from 'jimp';
import { beforeAll, describe, expect, it } from 'vitest';
import { readStampSheet, ReadingError } from '../../server/engine/reading/index.ts';
import { damageFile } from '../benchmarks/corpus/damage.ts';
import { drawLettering } from '../benchmarks/corpus/lettering.ts';
import { toJpeg, toWebp } from '../benchmarks/corpus/picture-maker.ts';
import { seeded } from '../benchmarks/corpus/random.ts';
import { renderSheet } from '../benchmarks/corpus/render.ts';

const FILES = process.env.LONG ? 500 : 60;
const HANG_MS = 10_000;

describe('damaged files', () => {
  const originals: Uint8Array[] = [];
  beforeAll(async () => {
    const drawing = drawLettering({ font: 'lora', lines: ['with love'], sizeMm: 8 });
    const raster = renderSheet(drawing.box.w + 8, drawing.box.h + 8, 8, [{ rings: drawing.rings.map((ring) => ring.map((p) => ({ x: p.x + 4, y: p.y + 4 }))), fill: '#222' }], '#fff');
    const image = new Jimp({ width: raster.width, height: raster.height, data: Buffer.from(raster.rgba) });
    for (const mime of ['image/png', 'image/bmp', 'image/tiff', 'image/gif'] as const) originals.push(new Uint8Array(await image.getBuffer(mime as 'image/png')));
    originals.push(await toJpeg(raster, 80), await toWebp(raster, 80));
  });

  it('the originals are read', async () => {
    for (const file of originals) expect((await readStampSheet(file, {})).sentiments.length).toBeGreaterThan(0);
  });

  it(`${FILES} of them end in a reading or a coded error, none hangs`, async () => {
    const random = seeded(20);
    const ends = new Map<string, number>();
    for (let i = 0; i < FILES; i++) {
      const file = damageFile(random, originals[i % originals.length]);
      const started = performance.now();
      const end = await readStampSheet(file, {}).then(() => 'read', (error: unknown) => (error instanceof ReadingError ? error.code : `not coded: ${String(error)}`));
      ends.set(end, (ends.get(end) ?? 0) + 1);
      expect(performance.now() - started, `file ${i}`).toBeLessThan(HANG_MS);
    }
    expect([...ends.keys()].filter((end) => !['read', 'unsupported-type', 'too-large', 'damaged', 'no-ink'].includes(end))).toEqual([]);
    expect(ends.get('damaged')).toBeGreaterThan(FILES / 10);
  }, 300_000);
});
