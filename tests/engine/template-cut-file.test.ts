import { SaxesParser } from 'saxes';
import { describe, expect, it } from 'vitest';
import { cutFileSvg } from '../../server/engine/template/index.ts';
import { sampleRun } from './template-orders.ts';

/** Read by a parser of its own: sizes in mm, and the boxes of the paths of each group. */
function readSvg(text: string) {
  const root: Record<string, string> = {}, groups: { title: string; boxes: { x: number; y: number; w: number; h: number }[] }[] = [];
  let title = false;
  const parser = new SaxesParser();
  parser.on('error', (error) => { throw error; });
  parser.on('opentag', ({ name, attributes }) => {
    const a = attributes as Record<string, string>;
    if (name === 'svg') Object.assign(root, a);
    if (name === 'g') groups.push({ title: '', boxes: [] });
    title = name === 'title';
    if (name !== 'path') return;
    const figures = [...a.d.matchAll(/-?[\d.]+/g)].map(Number);
    const xs = figures.filter((_, i) => i % 2 === 0), ys = figures.filter((_, i) => i % 2 === 1);
    groups[groups.length - 1].boxes.push({ x: Math.min(...xs), y: Math.min(...ys), w: Math.max(...xs) - Math.min(...xs), h: Math.max(...ys) - Math.min(...ys) });
  });
  parser.on('text', (words) => { if (title && groups.length > 0) groups[groups.length - 1].title = words; });
  parser.on('closetag', () => { title = false; });
  parser.write(text).close();
  return { root, groups };
}

describe('a cut file', () => {
  const { order, plan } = sampleRun(6, { turns: 2, rows: 2 });

  it('has the sheet’s size in mm, one group for each die, its labels of both turns at true size', () => {
    const { root, groups } = readSvg(cutFileSvg(order, plan, 2, { labels: { dies: { 'die 0-0': { name: 'Oval <1> & "more"' } } } }));
    expect([root.width, root.height, root.viewBox]).toEqual(['139.7mm', '165.1mm', '0 0 139.7 165.1']);
    expect(groups).toHaveLength(4);
    expect(groups[0].title).toBe('Oval <1> & "more"');
    groups.forEach(({ boxes }, i) => {
      const { shape } = order.dies[i].geometry;
      const size = 'widthMm' in shape ? [shape.widthMm, shape.heightMm] : [];
      expect(boxes).toHaveLength(2);
      // 0.001 mm is the figures' last digit.
      boxes.forEach((box) => expect([box.w, box.h]).toEqual(size.map((mm) => expect.closeTo(mm, 2))));
      // A half turn takes x to 139.7 − x and y to 165.1 − y.
      expect(boxes[1].x).toBeCloseTo(139.7 - boxes[0].x - boxes[0].w, 2);
      expect(boxes[1].y).toBeCloseTo(165.1 - boxes[0].y - boxes[0].h, 2);
    });
  });

  it('of a sheet that the plan does not have is refused', () => {
    expect(() => cutFileSvg(order, plan, 9)).toThrow(/no sheet 9/);
  });

  it('leaves out labels that are not cut', () => {
    const lines = order.lines.map((line, i) => (i === 0 ? { ...line, cut: 'none' as const } : line));
    expect(readSvg(cutFileSvg({ ...order, lines }, plan, 1)).groups).toHaveLength(3);
  });
});
