import { describe, expect, it } from 'vitest';
import { occasionTags, readStampSheet, recogniseWords } from '../../server/engine/reading/index.ts';
import { drawLettering } from '../benchmarks/corpus/lettering.ts';
import { toPng } from '../benchmarks/corpus/picture-maker.ts';
import { renderSheet } from '../benchmarks/corpus/render.ts';

describe('occasions', () => {
  it.each([
    ['Happy Birthday to you', ['birthday']], ['THANK YOU\nso much', ['thanks']], ['With deepest sympathy', ['sympathy']], ['it\'s a girl', ['baby']],
    ['Wedding wishes', ['wedding']], ['I showed up', []], ['', []], ['Happy Mother’s Day', ['mother’s day']], ['To: From:', ['gift tag']], ['hi!', ['greeting']], ['high five', []],
  ])('%j is for %j', (words, tags) => {
    expect(occasionTags(words)).toEqual(tags);
  });
});

describe('words', () => {
  it('are read from the outlines, and a picture of faces is told', async () => {
    const painted = [['Happy Birthday', 12], ['Thank you', 34], ['Best wishes', 56]].map(([words, top]) => ({
      fill: '#222', rings: drawLettering({ font: 'lora', lines: [words as string], sizeMm: 10 }).rings.map((ring) => ring.map((p) => ({ x: p.x + 10, y: p.y + (top as number) }))),
    }));
    const file = await toPng(renderSheet(110, 80, 8, painted, '#fff'));
    const right = await recogniseWords(await readStampSheet(file, { dpi: 203.2 }));
    expect(right.sentiments.map((s) => s.text)).toEqual(['Happy Birthday', 'Thank you', 'Best wishes']);
    expect(right.readsBetterFlipped).toBe(false);
    expect((await recogniseWords(await readStampSheet(file, { mirrored: true }))).readsBetterFlipped).toBe(true);
  });
});
