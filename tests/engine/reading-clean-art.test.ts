import { Jimp } from 'jimp';
import { describe, expect, it } from 'vitest';
import { readStampSheet } from '../../server/engine/reading/index.ts';
import { drawLettering, type Drawing, type Lettering } from '../benchmarks/corpus/lettering.ts';
import { renderSheet, type Painted, type Raster } from '../benchmarks/corpus/render.ts';

/** 1 px at 300 dpi. */
const PIXEL_MM = 25.4 / 300;

const sheet: Lettering[] = [
  { font: 'lora', lines: ['Happy Birthday', 'to you'], sizeMm: 8 },
  { font: 'great-vibes', lines: ['With Love'], sizeMm: 14 },
  { font: 'oswald', lines: ['THANK YOU'], sizeMm: 10 },
  { font: 'josefin-sans', lines: ['hello', 'friend'], sizeMm: 7 },
  { font: 'pacifico', lines: ['Congrats!'], sizeMm: 12 },
];

/** One below the other, 8 mm apart. */
function stack(fill: string): { painted: Painted[]; truth: Drawing['box'][]; heightMm: number } {
  const painted: Painted[] = [], truth: Drawing['box'][] = [];
  let y = 8;
  for (const lettering of sheet) {
    const drawing = drawLettering(lettering), top = y;
    painted.push({ fill, rings: drawing.rings.map((ring) => ring.map((p) => ({ x: p.x + 10, y: p.y + top }))) });
    truth.push({ ...drawing.box, x: 10, y: top });
    y += drawing.box.h + 8;
  }
  return { painted, truth, heightMm: y };
}

async function encode(raster: Raster, mime: 'image/png' | 'image/jpeg' | 'image/bmp' | 'image/tiff' | 'image/gif'): Promise<Uint8Array> {
  const image = new Jimp({ width: raster.width, height: raster.height, data: Buffer.from(raster.rgba) });
  return image.getBuffer(mime as 'image/png');
}

// Reference: glyph boxes from the font files themselves (opentype.js), drawn by another renderer (resvg).
describe('clean art', () => {
  const { painted, truth, heightMm } = stack('#1d1b1a');
  const raster = renderSheet(120, heightMm, 1 / PIXEL_MM, painted, '#ffffff');

  it.each(['image/png', 'image/jpeg', 'image/bmp', 'image/tiff'] as const)('as %s: finds every sentiment with its size to a pixel', async (mime) => {
    const reading = await readStampSheet(await encode(raster, mime), { dpi: 300 });
    expect(reading.sentiments).toHaveLength(truth.length);
    reading.sentiments.forEach((sentiment, i) => {
      expect(Math.abs(sentiment.widthMm! - truth[i].w), `width of ${i}`).toBeLessThan(PIXEL_MM);
      expect(Math.abs(sentiment.heightMm! - truth[i].h), `height of ${i}`).toBeLessThan(PIXEL_MM);
      expect(Math.abs(sentiment.boxPx.x * PIXEL_MM - truth[i].x), `left of ${i}`).toBeLessThan(PIXEL_MM);
      expect(Math.abs(sentiment.boxPx.y * PIXEL_MM - truth[i].y), `top of ${i}`).toBeLessThan(PIXEL_MM);
      expect(sentiment.angleDeg).toBe(0);
    });
  });
});
