import { describe, expect, it } from 'vitest';
import { templateDocument } from '../../server/engine/template/index.ts';
import type { PageDescription, PrinterProfile } from '../../server/engine/template/types.ts';
import { LETTER, SAMPLE_LABELS, sampleRun } from './template-orders.ts';

const PAPERS = [[101.6, 152.4], [148, 210], [215.9, 279.4], [279.4, 215.9], [210, 297], [304.8, 304.8], [297, 420]] as const;
const MARGINS = { left: 3, right: 5.5, top: 4, bottom: 12.7 };

function pagesOn(widthMm: number, heightMm: number, run = sampleRun(2, { turns: 2, rows: 2, corner: 'bottom-right', hinge: 'top' })): { printer: PrinterProfile; pages: PageDescription[] } {
  const printer: PrinterProfile = { ...LETTER, paper: { widthMm, heightMm }, unprintable: MARGINS, scale: { x: 0.985, y: 0.99 }, shift: { x: -1.2, y: 0.8 } };
  return { printer, pages: templateDocument(run.order, run.plan, { pages: ['ticket', 'placing', 'lid', 'dies-face-up', 'dies-face-down'], printer, unit: 'in', title: 'Spring', labels: SAMPLE_LABELS }).pages };
}

describe('on any paper', () => {
  it.each(PAPERS)('%d × %d mm: nothing lies where the printer does not reach, and every page has its scale check', (widthMm, heightMm) => {
    const { printer, pages } = pagesOn(widthMm, heightMm);
    for (const page of pages) {
      const drawn = page.items.flatMap((i) => (i.kind === 'path' ? i.rings.flat() : [i.at]));
      expect(drawn.every((p) => p.x >= 0 && p.y >= 0 && p.x <= widthMm && p.y <= heightMm), page.name).toBe(true);
      const printed = page.items.flatMap((i) => (i.kind === 'path' ? i.rings.flat() : [i.at])).map((p) => ({ x: printer.scale.x * p.x + printer.shift.x, y: printer.scale.y * p.y + printer.shift.y }));
      expect(Math.min(...printed.map((p) => p.x)), page.name).toBeGreaterThanOrEqual(MARGINS.left - 1e-6);
      expect(Math.max(...printed.map((p) => p.x)), page.name).toBeLessThanOrEqual(widthMm - MARGINS.right + 1e-6);
      expect(Math.min(...printed.map((p) => p.y)), page.name).toBeGreaterThanOrEqual(MARGINS.top - 1e-6);
      expect(Math.max(...printed.map((p) => p.y)), page.name).toBeLessThanOrEqual(heightMm - MARGINS.bottom + 1e-6);
      expect(page.items.filter((i) => i.role === 'scale-bar'), page.name).toHaveLength(2);
    }
    expect(new Set(pages.map((page) => page.name)).size).toBe(pages.length);
  });

  it('a tall sheet on wide paper has its words beside it instead of two tiles', () => {
    const run = sampleRun(2, { sheet: { w: 215.9, h: 279.4 }, bed: { w: 220, h: 279.4 } });
    const { pages } = pagesOn(320, 304.8, run);
    expect(pages.map((page) => page.name).filter((name) => name.includes('tile'))).toEqual([]);
  });

  it('paper too small for a drawing is refused with its size', () => {
    expect(() => pagesOn(90, 90)).toThrow(/too little even for tiles/);
    expect(() => pagesOn(60, 200)).toThrow(/leave only/);
  });
});
