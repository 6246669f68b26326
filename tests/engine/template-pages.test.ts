import jsQR from 'jsqr';
import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';
import { describe, expect, it, vi } from 'vitest';
import { dieCheckDocument, photoPageDocument, printerTestDocument, renderPdf, templateDocument } from '../../server/engine/template/index.ts';
import { svgPage } from '../../server/engine/template/page-svg.ts';
import type { PageDescription, PageItem, PagePath, PageRole, PrinterProfile, TemplatePage } from '../../server/engine/template/types.ts';
import { PHOTO_PAGE_MARKERS, PHOTO_PAGE_ROOM } from '../../server/engine/reading/photo-page-layout.ts';
import { A4, LETTER, SAMPLE_LABELS, sampleRun, SMALL, TWELVE } from './template-orders.ts';
import { rasterise, wordsOf } from './template-raster.ts';

const ALL: TemplatePage[] = ['placing', 'lid', 'dies-face-up', 'dies-face-down', 'sheet-cut', 'ticket'];
/** Its margins hold all that its scale and shift leave of the page. */
const WIDE: PrinterProfile = { ...LETTER, unprintable: { left: 5, right: 5, top: 5, bottom: 12 } };
const OFF: PrinterProfile = { ...WIDE, scale: { x: 1.02, y: 0.98 }, shift: { x: 1.5, y: -0.7 } };

function template(options: { printer?: PrinterProfile; labels?: unknown; pages?: TemplatePage[]; unit?: 'mm' | 'in' } = {}, run = sampleRun(5, { turns: 2, rows: 2 })) {
  return templateDocument(run.order, run.plan, { pages: options.pages ?? ALL, printer: options.printer ?? LETTER, unit: options.unit ?? 'mm', title: 'Spring', labels: 'labels' in options ? options.labels : SAMPLE_LABELS });
}
const pathsOf = (page: PageDescription, role: PageRole) => page.items.filter((i): i is PagePath => i.kind === 'path' && i.role === role);
const textsOf = (page: PageDescription) => page.items.flatMap((i) => (i.kind === 'text' ? [i.text] : []));
function boxOf(items: readonly PageItem[]) {
  const points = items.flatMap((i) => (i.kind === 'path' ? i.rings.flat() : []));
  const xs = points.map((p) => p.x), ys = points.map((p) => p.y);
  return { x: Math.min(...xs), y: Math.min(...ys), w: Math.max(...xs) - Math.min(...xs), h: Math.max(...ys) - Math.min(...ys) };
}

describe('the PDF', () => {
  it('opens without a warning, asks not to be scaled and carries its title', async () => {
    const pdf = await renderPdf(template());
    rasterise(pdf, 40);
    const warned = vi.spyOn(console, 'log').mockImplementation(() => {});
    const opened = await getDocument({ data: pdf.slice(), verbosity: 1, useSystemFonts: false }).promise;
    const { info } = await opened.getMetadata() as { info: { Title?: string; PDFFormatVersion?: string } };
    expect([info.Title, info.PDFFormatVersion]).toEqual(['Spring', '1.7']);
    expect(await opened.getViewerPreferences()).toMatchObject({ PrintScaling: 'None', DisplayDocTitle: true });
    for (let i = 1; i <= opened.numPages; i++) {
      const page = await opened.getPage(i);
      await page.getOperatorList();
      expect(page.view[2]).toBeCloseTo(612, 2);
    }
    expect(warned.mock.calls).toEqual([]);
    warned.mockRestore();
    await opened.destroy();
  });

  it('keeps words as words, letters of Latin Extended too, on the mirrored sheet too', async () => {
    const pages = wordsOf(await renderPdf(template()));
    expect(pages[0]).toContain('Zażółć gęślą');
    const lid = pages.find((text) => text.includes('Lid sheet'))!;
    for (const number of [/\b1 ?A\b/, /\b2 ?B\b/, /\b3 ?A\b/, /\b4 ?B\b/]) expect(lid).toMatch(number);
    for (const text of pages) expect(text).toContain('100 mm');
  });

  it('is the same whatever the drawing’s printer: only places change', async () => {
    const plain = template({ printer: WIDE }), corrected = template({ printer: OFF });
    plain.pages.forEach((page, i) => page.items.forEach((item, k) => {
      const other = corrected.pages[i].items[k];
      const a = item.kind === 'text' ? [item.at] : item.rings.flat(), b = other.kind === 'text' ? [other.at] : other.rings.flat();
      // printed = scale · drawn + shift must be what is wanted.
      a.forEach((p, n) => {
        expect(b[n].x * OFF.scale.x + OFF.shift.x).toBeCloseTo(p.x, 6);
        expect(b[n].y * OFF.scale.y + OFF.shift.y).toBeCloseTo(p.y, 6);
      });
    }));
  });
});

describe('the lid sheet', () => {
  it.each(['left', 'right', 'top', 'bottom'] as const)('is the placing sheet’s drawing mirrored across a hinge at the %s', (hinge) => {
    const run = sampleRun(9, { hinge });
    const { pages } = template({ pages: ['placing', 'lid'] }, run);
    const [placing, lid] = pages;
    const bedOf = (page: PageDescription) => boxOf(pathsOf(page, 'bed-edge'));
    const a = bedOf(placing), b = bedOf(lid);
    for (const role of ['cut-line', 'ink', 'body', 'baseline-tick', 'centre-tick', 'keep-out'] as const) {
      const there = pathsOf(lid, role);
      pathsOf(placing, role).forEach((item, i) => item.rings.flat().forEach((p, k) => {
        const q = there[i].rings.flat()[k], x = p.x - a.x, y = p.y - a.y;
        expect(q.x - b.x).toBeCloseTo(hinge === 'left' || hinge === 'right' ? 160 - x : x, 6);
        expect(q.y - b.y).toBeCloseTo(hinge === 'left' || hinge === 'right' ? y : 170 - y, 6);
      }));
    }
  });
});

describe('die sheets', () => {
  it('show a half turn’s labels where they land on the sheet, and face down mirrored left to right', () => {
    const run = sampleRun(5, { turns: 2, rows: 2 });
    const { pages } = template({ pages: ['dies-face-up', 'dies-face-down'] }, run);
    const [first, second, down] = pages;
    const sheet = boxOf(pathsOf(first, 'trim-line'));
    const now = pathsOf(first, 'cut-line').map((i) => boxOf([i])), later = pathsOf(second, 'cut-line').map((i) => boxOf([i]));
    expect(now).toHaveLength(4);
    // Half a turn takes the sheet's point p to (w − x, h − y).
    now.forEach((box, i) => {
      expect(later[i].x - sheet.x).toBeCloseTo(139.7 - (box.x - sheet.x) - box.w, 6);
      expect(later[i].y - sheet.y).toBeCloseTo(165.1 - (box.y - sheet.y) - box.h, 6);
    });
    const mirrored = boxOf(pathsOf(down, 'trim-line'));
    pathsOf(down, 'cut-line').map((i) => boxOf([i])).forEach((box, i) => expect(box.x - mirrored.x).toBeCloseTo(139.7 - (now[i].x - sheet.x) - now[i].w, 6));
  });

  it('share one page for sheets that are made and cut alike', () => {
    const names = template({ pages: ['dies-face-up'] }).pages.map((page) => page.name);
    expect(names).toEqual(['Setup 1: dies face up, sheets 1–3, cut pass 1 of 2', 'Setup 1: dies face up, sheets 1–3, cut pass 2 of 2']);
  });
});

describe('the run ticket', () => {
  it('has a code that opens the bench at its setup', async () => {
    const [raster] = rasterise(await renderPdf(template({ pages: ['ticket'] })), 150);
    const rgba = new Uint8ClampedArray(raster.width * raster.height * 4);
    raster.grey.forEach((g, i) => rgba.set([g, g, g, 255], i * 4));
    expect(jsQR(rgba, raster.width, raster.height)?.data).toBe('https://bench.example/studios/7/batches/12/bench?setup=1');
  });

  it('says that a phone cannot open a loopback address', () => {
    const said = (url: string) => textsOf(template({ pages: ['ticket'], labels: { benchUrl: url } }).pages[0]).join(' ');
    expect(said('http://127.0.0.1:3000/bench')).toContain('a phone cannot open');
    expect(said('http://192.168.1.20:3000/bench')).toContain('on a phone or tablet');
  });

  it('is one page for twelve places and forty sheets', () => {
    const run = sampleRun(8, { columns: 3, rows: 4, sheets: 40 });
    expect(template({ pages: ['ticket'] }, run).pages).toHaveLength(1);
  });
});

describe('labels', () => {
  it.each([{}, null, 7, 'x', [[]], { inks: 3, sentiments: [1], benchUrl: 'javascript:alert(1)', batchName: 5, dies: { 'die 0-0': null } }])('that say %j fall back to plain names', (labels) => {
    const [ticket] = template({ labels, pages: ['ticket'] }).pages;
    expect(textsOf(ticket)).toEqual(expect.arrayContaining(['Stamp 1', 'Die 1', 'Ink A']));
    expect(pathsOf(ticket, 'qr')).toEqual([]);
  });

  it('that call a sentiment size only have it drawn as a box that says so', () => {
    const { pages } = template({ pages: ['placing'], labels: { sentiments: { 'stamp 0-0': { boxOnly: true } } } });
    expect(textsOf(pages[0])).toContain('size only, no picture');
  });
});

describe('pages of their own', () => {
  it.each([LETTER, A4, TWELVE])('photo page: markers at the same distances from the middle, nothing in the room, on %o', (printer) => {
    const [page] = photoPageDocument(printer).pages;
    const markers = pathsOf(page, 'marker').map((m) => boxOf([m]));
    markers.forEach((box, i) => {
      expect(box.x + box.w / 2 - printer.paper.widthMm / 2).toBeCloseTo(PHOTO_PAGE_MARKERS[i].centre.x, 6);
      expect(box.y + box.h / 2 - printer.paper.heightMm / 2).toBeCloseTo(PHOTO_PAGE_MARKERS[i].centre.y, 6);
    });
    const room = { ...PHOTO_PAGE_ROOM, x: PHOTO_PAGE_ROOM.x + printer.paper.widthMm / 2, y: PHOTO_PAGE_ROOM.y + printer.paper.heightMm / 2 };
    const points = page.items.flatMap((i) => (i.kind === 'path' ? i.rings.flat() : [i.at]));
    expect(points.filter((p) => p.x > room.x && p.x < room.x + room.w && p.y > room.y && p.y < room.y + room.h)).toEqual([]);
    const { x, y, w, h } = boxOf(page.items);
    expect(x >= 4.2 && y >= 4.2 && x + w <= printer.paper.widthMm - 4.2 && y + h <= printer.paper.heightMm - 4.2).toBe(true);
  });

  it('printer test page: bars both ways, frame, cross and an ID-1 card (ISO/IEC 7810), drawn without correction', () => {
    const [page] = printerTestDocument(OFF, 'mm').pages;
    expect(pathsOf(page, 'scale-bar').map((bar) => boxOf([bar])).map(({ w, h }) => Math.max(w, h))).toEqual([100, 101.6, 100, 101.6].map((mm) => expect.closeTo(mm, 9)));
    expect(boxOf(pathsOf(page, 'margin-frame'))).toEqual({ x: 5, y: 5, w: expect.closeTo(205.9, 9), h: expect.closeTo(262.4, 9) });
    const cross = boxOf(pathsOf(page, 'test-cross'));
    expect([cross.x + cross.w / 2, cross.y + cross.h / 2]).toEqual([30, 40]);
    const card = boxOf(pathsOf(page, 'card'));
    expect([card.w, card.h]).toEqual([expect.closeTo(85.6, 6), expect.closeTo(53.98, 6)]);
  });

  it('die check sheet: every die at true size, on as many pages as it takes', () => {
    const dies = sampleRun(4, { setups: 4 }).order.dies.map(({ id, geometry }) => ({ name: id, geometry }));
    const { pages } = dieCheckDocument(dies, SMALL, 'in');
    const drawn = pages.flatMap((page) => pathsOf(page, 'die')).map((die) => boxOf([die]));
    expect(pages.length).toBeGreaterThan(1);
    const sizes = dies.map(({ geometry: { shape } }) => ('widthMm' in shape ? [shape.widthMm, shape.heightMm] : []));
    drawn.forEach((box, i) => expect([box.w, box.h]).toEqual(sizes[i].map((mm) => expect.closeTo(mm, 6))));
    expect(drawn).toHaveLength(24);
  });

  it('drawn as SVG: paper as view box, words at their anchors, paths closed', () => {
    const page = svgPage(template({ pages: ['placing'] }).pages[0]);
    expect(page.viewBox).toBe('0 0 215.9 279.4');
    const cut = page.items.find((i) => i.role === 'cut-line');
    expect(cut?.kind === 'path' && /^M[\d.]+ [\d.]+L.*Z$/.test(cut.d)).toBe(true);
  });
});
