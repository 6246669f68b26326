import { describe, expect, it } from 'vitest';
import { dieOutline } from '../../server/engine/fit/die-outline.ts';
import type { RunOrder, Setup } from '../../server/engine/gangrun/types.ts';
import type { Point, Ring } from '../../server/engine/geometry/types.ts';
import { renderPdf, templateDocument } from '../../server/engine/template/index.ts';
import type { PageDescription, PagePath, PageRole, PrinterProfile, TemplatePage } from '../../server/engine/template/types.ts';
import { A4, LETTER, randomNumbers, SAMPLE_LABELS, sampleRun, SMALL, TWELVE } from './template-orders.ts';
import { lineOffset, drawnAt, measureRings, rasterise } from './template-raster.ts';

/** Lines that words or marks cross by chance are not counted against the outline. */
const CROSSED = 0.03;
const PLANS = process.env.LONG ? 20 : 3;
const CORNERS = ['top-left', 'top-right', 'bottom-left', 'bottom-right'] as const;
const HINGES = ['left', 'right', 'top', 'bottom'] as const;
const PAPERS = [LETTER, A4, TWELVE];

function turned(p: Point, angleDeg: number): Point {
  const a = (angleDeg * Math.PI) / 180;
  return { x: Math.cos(a) * p.x - Math.sin(a) * p.y, y: Math.sin(a) * p.x + Math.cos(a) * p.y };
}

function boxOf(rings: readonly Ring[]): { x: number; y: number; w: number; h: number } {
  const xs = rings.flat().map((p) => p.x), ys = rings.flat().map((p) => p.y);
  return { x: Math.min(...xs), y: Math.min(...ys), w: Math.max(...xs) - Math.min(...xs), h: Math.max(...ys) - Math.min(...ys) };
}

/** From the plan's own definition of a place: the cut line and the ink of its only stamp, on the bed. */
function wanted(order: RunOrder, setup: Setup): { cut: Ring[]; ink: Ring[] }[] {
  return setup.placements.map((placement) => {
    const line = order.lines.find((l) => l.id === placement.lineIds[0])!;
    const [piece] = line.pieces;
    const angle = placement.rotationDeg - piece.rotationDeg;
    const die = dieOutline(order.dies.find((d) => d.id === line.dieId)!.geometry);
    const { artwork } = order.stamps.find((s) => s.id === piece.stampId)!;
    const box = boxOf(artwork.rings);
    const onBed = (q: Point, from: Point, a: number): Point => {
      const p = turned({ x: q.x - from.x, y: q.y - from.y }, a);
      return { x: p.x + placement.x, y: p.y + placement.y };
    };
    return {
      cut: die.rings.map((ring) => ring.map((q) => onBed(q, piece.centre, angle))),
      ink: artwork.rings.map((ring) => ring.map((q) => onBed(q, { x: box.x + box.w / 2, y: box.y + box.h / 2 }, placement.rotationDeg))),
    };
  });
}

function pathOf(page: PageDescription, role: PageRole): PagePath {
  const item = page.items.find((i): i is PagePath => i.kind === 'path' && i.role === role);
  if (!item) throw new Error(`${page.name} has no ${role}.`);
  return item;
}

/** What this printer makes of a drawn page: printed = scale · drawn + shift. */
function printedPage(page: PageDescription, { scale, shift }: PrinterProfile): PageDescription {
  const printed = (p: Point): Point => ({ x: p.x * scale.x + shift.x, y: p.y * scale.y + shift.y });
  return { ...page, items: page.items.map((i) => (i.kind === 'text' ? { ...i, at: printed(i.at) } : { ...i, rings: i.rings.map((ring) => ring.map(printed)) })) };
}

/** Where the bed's origin is on a printed page, told by its trim line. */
function originOf(page: PageDescription, trimmed: Point): Point {
  const box = boxOf(pathOf(page, 'trim-line').rings);
  return { x: box.x - trimmed.x, y: box.y - trimmed.y };
}

function moved(rings: readonly Ring[], by: Point): Ring[] {
  return rings.map((ring) => ring.map((p) => ({ x: p.x + by.x, y: p.y + by.y })));
}

function documentOf(run: ReturnType<typeof sampleRun>, pages: TemplatePage[], printer: PrinterProfile) {
  return templateDocument(run.order, run.plan, { pages, printer, unit: 'mm', title: 'Measured', labels: SAMPLE_LABELS });
}

describe('pages drawn by poppler at 600 dpi', () => {
  const random = randomNumbers(Number(process.env.SEED ?? 41));
  for (let i = 0; i < PLANS; i++) {
    const corner = CORNERS[i % 4], hinge = HINGES[Math.floor(random() * 4)], paper = PAPERS[i % 3];
    const printer: PrinterProfile = {
      ...paper,
      scale: { x: 0.97 + random() * 0.06, y: 0.97 + random() * 0.06 }, shift: { x: random() * 4 - 2, y: random() * 4 - 2 },
    };
    const turns = ([1, 2, 1] as const)[i % 3];
    const run = sampleRun(100 + i, { corner, hinge, turns, columns: 2, rows: turns === 1 ? 3 : 2, sheets: 1 });
    const title = `${paper.paper.widthMm} × ${paper.paper.heightMm} mm, corner ${corner}, hinge ${hinge}, printer × ${printer.scale.x.toFixed(3)}`;

    it(`shows cut lines, ink, edges and bars within 0.1 mm of the plan: ${title}`, async () => {
      const { order, plan } = run;
      const frame = { x: corner.endsWith('left') ? 0 : order.platform.widthMm - order.sheet.widthMm, y: corner.startsWith('top') ? 0 : order.platform.heightMm - order.sheet.heightMm };
      const drawn = documentOf(run, ['placing', 'lid'], printer);
      const [placing, lid] = drawn.pages.map((page) => printedPage(page, printer));
      const rasters = rasterise(await renderPdf(drawn));
      const mirror = (p: Point): Point => (hinge === 'left' || hinge === 'right' ? { x: order.platform.widthMm - p.x, y: p.y } : { x: p.x, y: order.platform.heightMm - p.y });
      const views = [
        { raster: rasters[0], page: placing, origin: originOf(placing, frame), map: (p: Point) => p },
        // The lid area is the whole bed here, and its mirror image again.
        { raster: rasters[1], page: lid, origin: originOf(lid, { x: 0, y: 0 }), map: mirror },
      ];
      for (const { raster, page, origin, map } of views) {
        for (const { cut, ink } of wanted(order, plan.setups[0])) {
          for (const rings of [cut, ink]) {
            const measured = measureRings(raster, moved(rings.map((ring) => ring.map(map)), origin), printer);
            expect(measured.off, page.name).toBeLessThanOrEqual(CROSSED);
            expect(measured.meanMm, page.name).toBeLessThan(0.04);
          }
        }
        expect(measureRings(raster, pathOf(page, 'trim-line').rings, printer).off).toBeLessThanOrEqual(CROSSED);
        checkBars(raster, page, printer);
      }
    });
  }
});

/** Both ends of both bars, across their middle: black begins and ends where the printed bar must. */
function checkBars(raster: Parameters<typeof lineOffset>[0], page: PageDescription, printer: PrinterProfile): void {
  const bars = page.items.filter((i): i is PagePath => i.kind === 'path' && i.role === 'scale-bar').map((bar) => boxOf(bar.rings));
  expect(bars.map((bar) => Math.max(bar.w, bar.h))).toEqual([expect.closeTo(100, 6), expect.closeTo(101.6, 6)]);
  for (const { x, y, w, h } of bars) {
    for (const [end, out] of [[x, -1], [x + w, 1]]) {
      const dark = (d: number) => raster.grey[index(raster, drawnAt({ x: end + out * d, y: y + h / 2 }, printer))] < 128;
      expect([dark(-0.1), dark(0.1)], page.name).toEqual([true, false]);
    }
  }
}

function index({ width }: { width: number }, p: Point): number {
  return Math.floor((p.y * 600) / 25.4) * width + Math.floor((p.x * 600) / 25.4);
}

describe('tiles', () => {
  it('overlap, share their crosses, and together hold every cut line', async () => {
    const run = sampleRun(7, { columns: 2, rows: 3, sheets: 1 });
    const { pages } = documentOf(run, ['placing'], SMALL);
    expect(pages.length).toBeGreaterThan(1);
    // Where each tile's page lies on the drawing: from crosses that both neighbours have, starting at the first tile.
    const marks = pages.map((page) => new Map(page.items.flatMap((i) => (i.kind === 'text' && i.role === 'join-mark' ? [[i.text, i.at] as const] : []))));
    const offsets: (Point | undefined)[] = pages.map((_, i) => (i === 0 ? { x: 0, y: 0 } : undefined));
    for (let round = 0; round < pages.length; round++) {
      marks.forEach((own, i) => {
        const from = offsets[i];
        if (!from) return;
        marks.forEach((other, k) => {
          for (const [letter, at] of own) {
            const there = other.get(letter);
            if (!there || k === i) continue;
            const offset = { x: from.x + at.x - there.x, y: from.y + at.y - there.y };
            if (offsets[k]) expect(Math.hypot(offsets[k].x - offset.x, offsets[k].y - offset.y)).toBeLessThan(1e-6);
            offsets[k] = offset;
          }
        });
      });
    }
    expect(offsets.every((o) => o !== undefined)).toBe(true);

    const first = pages.find((page) => page.items.some((i) => i.role === 'corner'))!;
    const corner = boxOf(pathOf(first, 'corner').rings), at = offsets[pages.indexOf(first)]!;
    // The corner's mark reaches 2.8 mm beyond the sheet's corner, which is the bed's origin.
    const origin = { x: corner.x + 2.8 + at.x, y: corner.y + 2.8 + at.y };
    const rasters = rasterise(await renderPdf(documentOf(run, ['placing'], SMALL)));
    for (const { cut } of wanted(run.order, run.plan.setups[0])) {
      for (const ring of moved(cut, origin)) {
        let missed = 0;
        ring.forEach((a, i) => {
          const b = ring[(i + 1) % ring.length];
          const length = Math.hypot(b.x - a.x, b.y - a.y);
          const found = rasters.some((raster, t) => {
            const offset = lineOffset(raster, { x: (a.x + b.x) / 2 - offsets[t]!.x, y: (a.y + b.y) / 2 - offsets[t]!.y }, { x: -(b.y - a.y) / length, y: (b.x - a.x) / length });
            return offset !== null && Math.abs(offset) <= 0.1;
          });
          if (!found) missed++;
        });
        expect(missed / ring.length).toBeLessThanOrEqual(CROSSED);
      }
    }
  });
});
